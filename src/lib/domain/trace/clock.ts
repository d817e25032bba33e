import type { Finding } from '../model';
import { medianStep, unwrap, type ClockForm } from '../import/time';

export interface Clock {
	/** s from trace start, never falling. */
	time: Float64Array;
	/** Rows of the table in the order of the clock, rows without a stamp left out; null where that is the file's own order. */
	order: Uint32Array | null;
	findings: Finding[];
	medianStepS: number;
}

const s = (value: number) => `${Number(value.toFixed(3))} s`;

/** Stamps of a clock too coarse for the sample rate (whole seconds at 10 Hz) are spread evenly up to the next stamp. */
function spreadCoarse(time: Float64Array): boolean {
	let repeats = 0;
	for (let i = 1; i < time.length; i++) if (time[i] === time[i - 1]) repeats++;
	if (time.length < 10 || repeats < 0.4 * time.length) return false;
	const starts = [0];
	for (let i = 1; i < time.length; i++) if (time[i] !== time[i - 1]) starts.push(i);
	if (starts.length < 3) return false;
	const usual = medianStep(Float64Array.from(starts, (at) => time[at]!));
	// The first run may have begun inside its tick and the last may be cut: both take the usual count of samples.
	const counts = starts.slice(1, -1).map((at, k) => starts[k + 2]! - at);
	counts.sort((a, b) => a - b);
	const usualCount = counts[counts.length >> 1] ?? starts[1]! - starts[0]!;
	for (let k = 0; k < starts.length; k++) {
		const from = starts[k]!;
		const to = starts[k + 1] ?? time.length;
		const tick = time[from]!;
		const inner = k > 0 && k < starts.length - 1;
		const step = inner ? (time[to]! - tick) / (to - from) : usual / Math.max(usualCount, to - from);
		const late = k === 0 ? Math.max(usualCount - (to - from), 0) : 0;
		for (let i = from; i < to; i++) time[i] = tick + (late + i - from) * Math.min(step, usual);
	}
	return true;
}

/** Where a stamp is smaller than the one before it: a short disorder is sorted, a restart of the clock is carried on. */
function straighten(
	raw: Float64Array,
	order: Uint32Array,
	step: number
): { time: Float64Array; order: Uint32Array; findings: Finding[] } {
	const time = new Float64Array(order.length);
	for (let i = 0; i < order.length; i++) time[i] = raw[order[i]!]!;
	const findings: Finding[] = [];
	const back: number[] = [];
	for (let i = 1; i < time.length; i++) if (time[i]! < time[i - 1]!) back.push(i);
	if (back.length === 0) return { time, order, findings };
	let offset = 0;
	let restarts = 0;
	const shift = new Float64Array(time.length);
	for (let i = 1; i < time.length; i++) {
		const fall = time[i - 1]! - time[i]!;
		if (fall > 20 * step) {
			offset += fall + step;
			restarts++;
		}
		shift[i] = offset;
	}
	for (let i = 0; i < time.length; i++) time[i] = time[i]! + shift[i]!;
	const sorted = Uint32Array.from(time.keys()).sort((a, b) => time[a]! - time[b]! || a - b);
	const spans: [number, number][] = back
		.slice(0, 50)
		.map((at) => [time[at]! - time[0]!, time[at]! - time[0]!]);
	findings.push({
		code: 'time_not_increasing',
		severity: 'warning',
		message: `Time goes backward ${back.length === 1 ? 'once' : `${back.length} times`}, first near ${s(spans[0]![0])} of the trace. ${
			restarts > 0
				? `Where the clock starts again (${restarts === 1 ? 'once' : `${restarts} times`}) the rows that follow are placed after those before.`
				: 'The rows are put in the order of their stamps.'
		}`,
		spans,
		channel: 'time'
	});
	return {
		time: Float64Array.from(sorted, (at) => time[at]!),
		order: Uint32Array.from(sorted, (at) => order[at]!),
		findings
	};
}

function repeatedStamps(time: Float64Array): Finding[] {
	const spans: [number, number][] = [];
	let count = 0;
	for (let i = 1; i < time.length; i++)
		if (time[i] === time[i - 1]) {
			count++;
			const last = spans.at(-1);
			if (last && last[1] === time[i]) continue;
			if (spans.length < 50) spans.push([time[i]!, time[i]!]);
		}
	if (count === 0) return [];
	return [
		{
			code: 'repeated_stamp',
			severity: 'warning',
			message: `${count === 1 ? 'One row repeats' : `${count} rows repeat`} the time stamp of the row before, first at ${s(spans[0]![0])}. Both rows are kept; look whether the logger doubled a sample.`,
			spans,
			channel: 'time'
		}
	];
}

function gaps(time: Float64Array, step: number): Finding[] {
	const spans: [number, number][] = [];
	let total = 0;
	let longest = 0;
	for (let i = 1; i < time.length; i++) {
		const wide = time[i]! - time[i - 1]!;
		if (wide > 5 * step * (1 + 1e-9)) {
			if (spans.length < 50) spans.push([time[i - 1]!, time[i]!]);
			total++;
			longest = Math.max(longest, wide);
		}
	}
	if (total === 0) return [];
	const [from, to] = spans[0]!;
	return [
		{
			code: 'gap',
			severity: 'warning',
			message: `Samples are missing ${total === 1 ? `between ${s(from)} and ${s(to)}` : `in ${total} gaps, first between ${s(from)} and ${s(to)}, the longest ${s(longest)}`}; the usual step is ${s(step)}.`,
			spans,
			channel: 'time'
		}
	];
}

/**
 * Makes the clock of a trace: seconds from its start, never falling, with what is wrong with it as findings.
 *
 * @param values the time column, in seconds or in the form's own seconds; NaN where a row has no stamp
 * @param form how the stamps are written; wraps past midnight are taken out
 */
export function makeClock(values: Float64Array, form: 'number' | ClockForm): Clock {
	const raw = values.slice();
	const findings: Finding[] = [];
	const wraps = form === 'number' ? 0 : unwrap(raw, form);
	if (wraps > 0)
		findings.push({
			code: 'clock_wrap',
			severity: 'info',
			message: `The clock passes ${form === 'clock' ? 'midnight' : 'the full hour'} ${wraps === 1 ? 'once' : `${wraps} times`}; time is counted on.`,
			spans: [],
			channel: 'time'
		});
	let order = new Uint32Array(raw.length);
	for (let i = 0; i < raw.length; i++) order[i] = i;
	if (raw.some((value) => Number.isNaN(value))) {
		order = order.filter((row) => !Number.isNaN(raw[row]!));
		findings.push({
			code: 'time_missing',
			severity: 'warning',
			message: `${raw.length - order.length} of ${raw.length} rows have no readable time stamp and are left out.`,
			spans: [],
			channel: 'time'
		});
	}
	const straight = straighten(raw, order, medianStep(raw));
	const time = straight.time;
	const start = time[0] ?? 0;
	for (let i = 0; i < time.length; i++) time[i] = time[i]! - start;
	if (spreadCoarse(time))
		findings.push({
			code: 'clock_coarse',
			severity: 'info',
			message:
				'The clock is coarser than the sample rate: several rows share each stamp and are spread evenly up to the next.',
			spans: [],
			channel: 'time'
		});
	const step = medianStep(time);
	return {
		time,
		order: straight.findings.length === 0 && order.length === raw.length ? null : straight.order,
		findings: [...findings, ...straight.findings, ...repeatedStamps(time), ...gaps(time, step)],
		medianStepS: step
	};
}
