import { fitAt } from '../statistics/local-fit';

/** Name and version of the fit, stored with every figure that it makes. */
export const LOCAL_FIT = 'local-fit.1';

/** Half-width of the fit, as a share of the measured speeds, and in bins at least. */
const HALF_WIDTH_SHARE = 0.16;
const LEAST_BINS = 4;
const DEGREE = 3;
const GRID = 200;

export interface LocalValue {
	x: number;
	value: number;
	/** Standard uncertainty of the fitted value from the scatter of the bins about the fit; null where too few bins tell it. */
	u: number | null;
}

interface Series {
	x: Float64Array;
	y: Float64Array;
}

/** Pairs that are both known; x ascending. */
function knownPairs(x: ArrayLike<number>, y: ArrayLike<number>): Series {
	const keep: number[] = [];
	for (let i = 0; i < x.length; i++) if (Number.isFinite(x[i]! + y[i]!)) keep.push(i);
	return { x: Float64Array.from(keep, (i) => x[i]!), y: Float64Array.from(keep, (i) => y[i]!) };
}

function halfWidth({ x }: Series): number {
	const span = x[x.length - 1]! - x[0]!;
	return Math.max(HALF_WIDTH_SHARE * span, (LEAST_BINS * span) / Math.max(x.length - 1, 1));
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

const degreeFor = (count: number) => Math.min(DEGREE, Math.max(0, count - 2));

function polynomial(c: readonly number[], dx: number): number {
	let sum = 0;
	for (let k = c.length - 1; k >= 0; k--) sum = sum * dx + c[k]!;
	return sum;
}

/**
 * Standard uncertainty of the fitted value at x0: the residual standard deviation times the length of the weights by which the
 * bins make it (the fit is linear in its values).
 */
function uncertainty(
	series: Series,
	from: number,
	to: number,
	x0: number,
	degree: number,
	c: readonly number[]
): number | null {
	const count = to - from;
	if (count < degree + 3) return null;
	let squares = 0;
	for (let i = from; i < to; i++) squares += (series.y[i]! - polynomial(c, series.x[i]! - x0)) ** 2;
	const sd = Math.sqrt(squares / (count - degree - 1));
	const unit = new Float64Array(series.y.length);
	let weights = 0;
	for (let i = from; i < to; i++) {
		unit[i] = 1;
		weights += (fitAt(series.x, unit, from, to, x0, degree)?.[0] ?? 0) ** 2;
		unit[i] = 0;
	}
	return sd * Math.sqrt(weights);
}

function evaluate(series: Series, at: number): LocalValue | null {
	if (series.x.length === 0) return null;
	if (series.x.length < 4) return nearest(series, at);
	const [from, to] = windowAround(series, at, halfWidth(series));
	const degree = degreeFor(to - from);
	const c = fitAt(series.x, series.y, from, to, at, degree);
	if (!c) return nearest(series, at);
	return { x: at, value: c[0]!, u: uncertainty(series, from, to, at, degree, c) };
}

function fittedAt(series: Series, at: number, half: number): number {
	const [from, to] = windowAround(series, at, half);
	return fitAt(series.x, series.y, from, to, at, degreeFor(to - from))?.[0] ?? NaN;
}

function nearest(series: Series, at: number): LocalValue {
	let best = 0;
	for (let i = 1; i < series.x.length; i++)
		if (Math.abs(series.x[i]! - at) < Math.abs(series.x[best]! - at)) best = i;
	return { x: series.x[best]!, value: series.y[best]!, u: null };
}

/** The curve's value at a speed, by the local fit; null where there is no curve. */
export function localValue(x: ArrayLike<number>, y: ArrayLike<number>, at: number): LocalValue | null {
	return evaluate(knownPairs(x, y), at);
}

/**
 * Highest or lowest value of a curve over its measured speeds, by a cubic fitted over the neighbouring bins: neither the width of
 * a bin nor the end of the ramp biases it.
 *
 * @param x speeds of the bins, rev/min, ascending @param y values; NaN where a bin has none
 * @param range speeds that were measured: the fit is never evaluated outside
 */
export function localPeak(
	x: ArrayLike<number>,
	y: ArrayLike<number>,
	range: readonly [number, number],
	sign: 1 | -1 = 1
): LocalValue | null {
	const series = knownPairs(x, y);
	const n = series.x.length;
	if (n === 0) return null;
	if (n < 4) {
		let best = 0;
		for (let i = 1; i < n; i++) if (sign * series.y[i]! > sign * series.y[best]!) best = i;
		return { x: series.x[best]!, value: series.y[best]!, u: null };
	}
	const half = halfWidth(series);
	// Half a bin beyond the outer bins' means is where the samples of those bins end.
	const bin = (series.x[n - 1]! - series.x[0]!) / (n - 1);
	const lo = Math.max(range[0], series.x[0]! - bin);
	const hi = Math.min(range[1], series.x[n - 1]! + bin);
	const candidates = [lo, hi, ...series.x.filter((value) => value > lo && value < hi)];
	let at = lo;
	let most = -Infinity;
	for (const candidate of candidates) {
		const value = sign * fittedAt(series, candidate, half);
		if (value > most) {
			most = value;
			at = candidate;
		}
	}
	// Around the best bin one fit is searched finely, and searched again around what it finds.
	for (let pass = 0; pass < 3; pass++) {
		const [from, to] = windowAround(series, at, half);
		const c = fitAt(series.x, series.y, from, to, at, degreeFor(to - from));
		if (!c) break;
		const reach = half / 2;
		let next = at;
		most = -Infinity;
		for (let k = -GRID; k <= GRID; k++) {
			const candidate = Math.min(Math.max(at + (k / GRID) * reach, lo), hi);
			const value = sign * polynomial(c, candidate - at);
			if (value > most) {
				most = value;
				next = candidate;
			}
		}
		if (Math.abs(next - at) < 1) break;
		at = next;
	}
	return evaluate(series, at);
}
