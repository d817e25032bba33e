import { hampelSpikes } from '../statistics/hampel';
import { median, quantile } from '../statistics/moments';

/** Settings of the search; ours, stored with the method. */
const REACH = 4;
const HALF_WIDTH = 10;
const CANDIDATE_SD = 8;
const HAMPEL_SD = 6;
const LONGEST = 3;
const LEAST_SHARE_OF_RANGE = 0.02;

/** At most this many values are looked at for a scale. */
const SCALE_SAMPLES = 5000;

/** Some thousands of the values, evenly taken: enough for a quantile, whatever the size of the trace. */
export function thinned(values: ArrayLike<number>): number[] {
	const stride = Math.max(1, Math.floor(values.length / SCALE_SAMPLES));
	const out: number[] = [];
	for (let i = 0; i < values.length; i += stride) out.push(values[i]!);
	return out;
}

/**
 * Rows whose value is a spike: up to three samples that stand apart from their neighbours on both sides.
 *
 * A cheap test against the samples four before and after finds candidates over millions of rows; the Hampel identifier
 * judges only those, in a window of ten samples on each side. A step, a ramp and a plateau are no spikes.
 *
 * @param values one per row; NaN rows are skipped, so that a sparse channel is judged on its own samples
 */
export function findSpikes(values: Float64Array): number[] {
	const rows = knownRows(values);
	const n = rows?.length ?? values.length;
	if (n < 4 * REACH) return [];
	const known = rows ? rows.map((row) => values[row]!) : values;
	const distance = (i: number) => {
		// At the ends the middle of the nearest samples stands in for the side that is not there.
		const before = known[Math.max(i - REACH, i < REACH ? Math.min(i + 2, n - 1) : 0)]!;
		const after = known[Math.min(i + REACH, i + REACH >= n ? Math.max(i - 2, 0) : n - 1)]!;
		return Math.abs(known[i]! - (before + after) / 2);
	};
	const some = thinned(known);
	const distances: number[] = [];
	const stride = Math.max(1, Math.floor(n / SCALE_SAMPLES));
	for (let i = REACH; i < n - REACH; i += stride) distances.push(distance(i));
	// The middle alone would be nothing where a channel stands still for most of the run.
	const scale = Math.max(1.4826 * median(distances), quantile(distances, 0.9) / 1.645);
	const floor = Math.max(
		LEAST_SHARE_OF_RANGE * (quantile(some, 0.98) - quantile(some, 0.02)),
		2e-3 * Math.abs(median(some)),
		HAMPEL_SD * scale,
		Number.MIN_VALUE
	);
	const limit = Math.max(CANDIDATE_SD * scale, floor);
	const spikes: number[] = [];
	for (let i = 0; i < n; i++) {
		if (!(distance(i) > limit)) continue;
		const from = Math.max(0, i - HALF_WIDTH);
		const window = known.subarray(from, Math.min(n, i + HALF_WIDTH + 1));
		if (hampelSpikes(window, HALF_WIDTH, HAMPEL_SD, floor)[i - from]) spikes.push(i);
	}
	return shortRuns(spikes).map((i) => (rows ? rows[i]! : i));
}

/** Rows that hold a value; null where all do, the usual case. */
function knownRows(values: Float64Array): Float64Array | null {
	let known = 0;
	for (let i = 0; i < values.length; i++) if (values[i] === values[i]) known++;
	if (known === values.length) return null;
	const rows = new Float64Array(known);
	for (let i = 0, k = 0; i < values.length; i++) if (values[i] === values[i]) rows[k++] = i;
	return rows;
}

/** A longer run is an event of the engine, not a fault of one sample. */
function shortRuns(indices: readonly number[]): number[] {
	const kept: number[] = [];
	for (let k = 0; k < indices.length;) {
		let end = k + 1;
		while (end < indices.length && indices[end] === indices[end - 1]! + 1) end++;
		if (end - k <= LONGEST) kept.push(...indices.slice(k, end));
		k = end;
	}
	return kept;
}

/** The values with their spikes left out (NaN); the same array where there is none. */
export function withoutSpikes(values: Float64Array, spikes: readonly number[]): Float64Array {
	if (spikes.length === 0) return values;
	const clean = Float64Array.from(values);
	for (const row of spikes) clean[row] = NaN;
	return clean;
}
