import { weightedFit, type WeightedFit } from './weighted-fit';

/** Name and version of the fit, stored with every figure that it makes. */
export const LOCAL_FIT = 'local-fit.1';

/** Half-widths of the window that are tried, as shares of the measured speeds, and the least in bins. */
const HALF_WIDTH_SHARES = [0.16, 0.22, 0.3, 0.42];
const LEAST_BINS = 4;
const DEGREE = 3;
const GRID = 200;
/** Standard uncertainties by which the estimates of a wider and a narrower window may differ. */
const AGREEMENT = 1;

export interface LocalValue {
	x: number;
	value: number;
	/** Standard uncertainty of the fitted value by the scatter of the bins about the fit; null where too few bins tell it. */
	u: number | null;
}

/** A curve over speed: bins with how many samples each holds. */
export interface Series {
	x: Float64Array;
	y: Float64Array;
	w: Float64Array;
}

/** Bins where the channel is known; x ascending. */
export function seriesOf(x: Float64Array, y: Float64Array, w: Float64Array): Series {
	const keep: number[] = [];
	for (let i = 0; i < x.length; i++) if (Number.isFinite(x[i]! + y[i]!)) keep.push(i);
	const pick = (values: Float64Array) => Float64Array.from(keep, (i) => values[i]!);
	return { x: pick(x), y: pick(y), w: pick(w) };
}

/** Bins around a speed; at an end of the curve the window keeps its width and leans inward. */
function windowAround({ x }: Series, at: number, half: number): [from: number, to: number] {
	const n = x.length;
	const lo = Math.min(Math.max(at - half, x[0]!), Math.max(x[n - 1]! - 2 * half, x[0]!));
	const hi = Math.max(Math.min(at + half, x[n - 1]!), Math.min(x[0]! + 2 * half, x[n - 1]!));
	let from = 0;
	while (from < n && x[from]! < lo - 1e-9) from++;
	let to = n;
	while (to > from && x[to - 1]! > hi + 1e-9) to--;
	return [from, to];
}

function fitIn(series: Series, at: number, half: number): WeightedFit | null {
	const [from, to] = windowAround(series, at, half);
	return weightedFit(
		series.x,
		series.y,
		series.w,
		from,
		to,
		at,
		Math.min(DEGREE, Math.max(0, to - from - 2))
	);
}

function halfWidths({ x }: Series): number[] {
	const span = x[x.length - 1]! - x[0]!;
	const least = (LEAST_BINS * span) / Math.max(x.length - 1, 1);
	return HALF_WIDTH_SHARES.map((share) => Math.max(share * span, least));
}

/**
 * The widest window whose estimate still agrees with those of all narrower ones (intersection of confidence intervals): a
 * noisy smooth curve is averaged far, a curve with detail is not bent.
 */
function chosenHalfWidth(series: Series, at: number): number {
	const widths = halfWidths(series);
	let [lo, hi] = [-Infinity, Infinity];
	let chosen = widths[0]!;
	for (const half of widths) {
		const fit = fitIn(series, at, half);
		if (!fit || Number.isNaN(fit.u)) break;
		lo = Math.max(lo, fit.c[0]! - AGREEMENT * fit.u);
		hi = Math.min(hi, fit.c[0]! + AGREEMENT * fit.u);
		if (lo > hi) break;
		chosen = half;
	}
	return chosen;
}

function polynomial(c: readonly number[], dx: number): number {
	let sum = 0;
	for (let k = c.length - 1; k >= 0; k--) sum = sum * dx + c[k]!;
	return sum;
}

function nearest({ x, y }: Series, at: number): LocalValue {
	let best = 0;
	for (let i = 1; i < x.length; i++) if (Math.abs(x[i]! - at) < Math.abs(x[best]! - at)) best = i;
	return { x: x[best]!, value: y[best]!, u: null };
}

/** The curve's value at a speed, by the local fit; null where there is no curve. */
export function localValue(series: Series, at: number): LocalValue | null {
	if (series.x.length === 0) return null;
	const fit = series.x.length < 4 ? null : fitIn(series, at, chosenHalfWidth(series, at));
	if (!fit) return nearest(series, at);
	return { x: at, value: fit.c[0]!, u: Number.isNaN(fit.u) ? null : fit.u };
}

function extremeBin({ x, y }: Series, sign: 1 | -1): LocalValue {
	let best = 0;
	for (let i = 1; i < x.length; i++) if (sign * y[i]! > sign * y[best]!) best = i;
	return { x: x[best]!, value: y[best]!, u: null };
}

/**
 * Highest or lowest value of a curve over its measured speeds, by a cubic fitted over the neighbouring bins: neither the width of
 * a bin nor the end of the ramp biases it.
 *
 * @param range speeds that were measured: the fit is never evaluated outside
 */
export function localPeak(
	series: Series,
	range: readonly [number, number],
	sign: 1 | -1 = 1
): LocalValue | null {
	const { x } = series;
	const n = x.length;
	if (n === 0) return null;
	if (n < 4) return extremeBin(series, sign);
	// Half a bin beyond the outer bins' means is where the samples of those bins end.
	const bin = (x[n - 1]! - x[0]!) / (n - 1);
	const lo = Math.max(range[0], x[0]! - bin);
	const hi = Math.min(range[1], x[n - 1]! + bin);
	// A middling window finds where to look; the choice of its width is made there.
	const middling = halfWidths(series)[1]!;
	let at = lo;
	let most = -Infinity;
	for (const candidate of [lo, hi, ...x.filter((value) => value > lo && value < hi)]) {
		const value = sign * (fitIn(series, candidate, middling)?.c[0] ?? NaN);
		if (value > most) {
			most = value;
			at = candidate;
		}
	}
	const half = chosenHalfWidth(series, at);
	for (let pass = 0; pass < 4; pass++) {
		const fit = fitIn(series, at, half);
		if (!fit) break;
		const reach = middling;
		let next = at;
		most = -Infinity;
		for (let k = -GRID; k <= GRID; k++) {
			const candidate = Math.min(Math.max(at + (k / GRID) * reach, lo), hi);
			const value = sign * polynomial(fit.c, candidate - at);
			if (value > most) {
				most = value;
				next = candidate;
			}
		}
		const moved = Math.abs(next - at);
		at = next;
		if (moved < 1) break;
	}
	const fit = fitIn(series, at, half);
	return fit ? { x: at, value: fit.c[0]!, u: Number.isNaN(fit.u) ? null : fit.u } : nearest(series, at);
}
