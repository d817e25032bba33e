import { medianStep } from '../import/time';
import { withoutSpikes } from '../trace/spikes';
import type { Trace } from '../trace/trace';
import { channelOf } from '../channels/catalogue';

/** A channel with fewer of its rows filled than this comes from a slower recorder and is joined up between its samples. */
const SPARSE_SHARE = 0.5;
const LEAST_SAMPLES = 5;
const LONGEST_GAP_STEPS = 5;

/** Straight lines between the known samples of a sparse channel, not across holes of its own. */
function joinSparse(time: Float64Array, values: Float64Array): Float64Array {
	let count = 0;
	for (let i = 0; i < values.length; i++) if (values[i] === values[i]) count++;
	if (count < LEAST_SAMPLES || count > SPARSE_SHARE * values.length) return values;
	const known: number[] = [];
	for (let i = 0; i < values.length; i++) if (values[i] === values[i]) known.push(i);
	const step = medianStep(Float64Array.from(known, (row) => time[row]!));
	const joined = Float64Array.from(values);
	for (let k = 1; k < known.length; k++) {
		const [from, to] = [known[k - 1]!, known[k]!];
		const wide = time[to]! - time[from]!;
		if (!(wide > 0) || wide > LONGEST_GAP_STEPS * step) continue;
		const slope = (values[to]! - values[from]!) / wide;
		for (let i = from + 1; i < to; i++) joined[i] = values[from]! + slope * (time[i]! - time[from]!);
	}
	return joined;
}

/** The canonical channels of a trace as the reduction takes them: spikes left out, slow channels joined up. */
export function reductionColumns(
	trace: Trace,
	spikes: ReadonlyMap<string, readonly number[]>
): Map<string, Float64Array> {
	const columns = new Map<string, Float64Array>();
	for (const column of trace.columns) {
		if (!channelOf(column.code)) continue;
		const clean = withoutSpikes(column.values, spikes.get(column.code) ?? []);
		columns.set(column.code, trace.time ? joinSparse(trace.time, clean) : clean);
	}
	return columns;
}

/** Centred mean over about `widthS`, shrinking evenly towards both ends so that a slope is not bent. */
export function centredMean(
	time: Float64Array,
	values: Float64Array,
	from: number,
	to: number,
	widthS: number
): Float64Array {
	const mean = Float64Array.from(values);
	const step = medianStep(time.subarray(from, to));
	const half = Math.floor(widthS / step / 2);
	if (!(half >= 1)) return mean;
	const sums = new Float64Array(to - from + 1);
	const counts = new Float64Array(to - from + 1);
	for (let i = from; i < to; i++) {
		const known = !Number.isNaN(values[i]!);
		sums[i - from + 1] = sums[i - from]! + (known ? values[i]! : 0);
		counts[i - from + 1] = counts[i - from]! + (known ? 1 : 0);
	}
	for (let i = from; i < to; i++) {
		const reach = Math.min(half, i - from, to - 1 - i);
		const [a, b] = [i - reach - from, i + reach + 1 - from];
		const n = counts[b]! - counts[a]!;
		mean[i] = n > 0 ? (sums[b]! - sums[a]!) / n : NaN;
	}
	return mean;
}
