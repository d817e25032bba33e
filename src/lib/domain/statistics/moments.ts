import { mean as meanOf, medianSorted, sampleStandardDeviation } from 'simple-statistics';
import { tQuantile } from './student-t';

/** The known ones among samples: a missing mark is not a zero. */
function known(values: ArrayLike<number>): number[] {
	const out: number[] = [];
	for (let i = 0; i < values.length; i++) if (Number.isFinite(values[i])) out.push(values[i]!);
	return out;
}

const ascending = (values: ArrayLike<number>) => known(values).sort((a, b) => a - b);

/** Arithmetic mean of the known samples, by compensated summation; NaN where there are none. 40 CFR 1065.602(b). */
export function mean(values: ArrayLike<number>): number {
	const list = known(values);
	return list.length > 0 ? meanOf(list) : NaN;
}

/** Sample standard deviation (N − 1) of the known samples; NaN below two. 40 CFR 1065.602(c). */
export function standardDeviation(values: ArrayLike<number>): number {
	const list = known(values);
	return list.length > 1 ? sampleStandardDeviation(list) : NaN;
}

/** Coefficient of variation: standard deviation over the mean's size, a fraction; NaN at a mean of zero. */
export function coefficientOfVariation(values: ArrayLike<number>): number {
	const middle = Math.abs(mean(values));
	return middle > 0 ? standardDeviation(values) / middle : NaN;
}

/** Median of the known samples; of an even number the mean of the middle two. 40 CFR 1065.602(m). NaN where there are none. */
export function median(values: ArrayLike<number>): number {
	const list = ascending(values);
	return list.length > 0 ? medianSorted(list) : NaN;
}

/** Median of the distances from the median; 1.4826 times it estimates a normal distribution's standard deviation. */
export function medianAbsoluteDeviation(values: ArrayLike<number>): number {
	const middle = median(values);
	return median(known(values).map((value) => Math.abs(value - middle)));
}

/**
 * Quantile by straight line between order statistics (the h = (n − 1)p + 1 rule, as spreadsheets and numerical packages default to).
 * @param p 0 to 1 @returns NaN where there are no samples or p is outside
 */
export function quantile(values: ArrayLike<number>, p: number): number {
	const list = ascending(values);
	if (list.length === 0 || !(p >= 0 && p <= 1)) return NaN;
	const at = (list.length - 1) * p;
	const below = Math.floor(at);
	const above = Math.min(below + 1, list.length - 1);
	return list[below]! + (at - below) * (list[above]! - list[below]!);
}

export interface Summary {
	n: number;
	mean: number;
	sd: number;
	/** Two-sided confidence interval of the mean; null below two samples. */
	interval: [lo: number, hi: number] | null;
}

/**
 * n, mean, standard deviation and the t interval of the mean of independent samples.
 * @param confidence between 0 and 1; default 0.95
 */
export function summarise(values: ArrayLike<number>, confidence = 0.95): Summary {
	const list = known(values);
	const middle = mean(list);
	const sd = standardDeviation(list);
	if (list.length < 2) return { n: list.length, mean: middle, sd, interval: null };
	const half = (tQuantile((1 + confidence) / 2, list.length - 1) * sd) / Math.sqrt(list.length);
	return { n: list.length, mean: middle, sd, interval: [middle - half, middle + half] };
}
