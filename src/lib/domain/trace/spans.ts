import type { Span } from '../model';

const MOST_SPANS = 100;

/** Stretches of marked samples as times of their first and last sample; nothing without a clock. */
export function spansWhere(time: Float64Array | null, marked: (i: number) => boolean, rows: number): Span[] {
	if (!time) return [];
	const spans: Span[] = [];
	let from = -1;
	for (let i = 0; i <= rows; i++) {
		const on = i < rows && marked(i);
		if (on && from < 0) from = i;
		if (on || from < 0) continue;
		spans.push([time[from]!, time[i - 1]!]);
		from = -1;
		if (spans.length === MOST_SPANS) break;
	}
	return spans;
}

/** A time for a sentence: `24.0 s`. */
export const atS = (seconds: number) => `${seconds.toFixed(seconds < 1000 ? 2 : 1)} s`;

/** A value for a sentence: four significant digits, no exponent for what people read. */
export function figure(value: number): string {
	if (!Number.isFinite(value)) return String(value);
	const size = Math.abs(value);
	if (size >= 1e7 || (size > 0 && size < 1e-4)) return value.toExponential(3);
	return size >= 1000 ? value.toFixed(size >= 10_000 ? 0 : 1) : String(Number(value.toPrecision(4)));
}
