import { gammaln } from 'simple-statistics';

/** Continued fraction of the incomplete beta function, by Lentz's method; converges for x < (a + 1)/(a + b + 2). */
function betaFraction(a: number, b: number, x: number): number {
	const tiny = 1e-300;
	let c = 1;
	let d = 1 / (1 - ((a + b) * x) / (a + 1) || tiny);
	let value = d;
	for (let m = 1; m <= 10_000; m++) {
		const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
		d = 1 / (1 + even * d || tiny);
		c = 1 + even / c || tiny;
		value *= d * c;
		const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
		d = 1 / (1 + odd * d || tiny);
		c = 1 + odd / c || tiny;
		value *= d * c;
		if (Math.abs(d * c - 1) < 1e-16) break;
	}
	return value;
}

/** Regularised incomplete beta function I_x(a, b). */
function incompleteBeta(a: number, b: number, x: number): number {
	if (x <= 0 || x >= 1) return x <= 0 ? 0 : 1;
	const front = Math.exp(gammaln(a + b) - gammaln(a) - gammaln(b) + a * Math.log(x) + b * Math.log1p(-x));
	return x < (a + 1) / (a + b + 2)
		? (front * betaFraction(a, b, x)) / a
		: 1 - (front * betaFraction(b, a, 1 - x)) / b;
}

/**
 * Upper tail of Student's t, P(T > t).
 * @param t at or above 0 @param df degrees of freedom, above 0, whole or not
 */
function upperTail(t: number, df: number): number {
	return incompleteBeta(df / 2, 0.5, df / (df + t * t)) / 2;
}

/** Cumulative distribution of Student's t. @param df degrees of freedom, above 0, whole or not @returns 0 to 1 */
export function tCumulative(t: number, df: number): number {
	return t < 0 ? upperTail(-t, df) : 1 - upperTail(t, df);
}

/**
 * Quantile of Student's t, by bisection on its tail: slow and sure. Checked against the table of 40 CFR 1065.602 and a statistics library.
 * @param p probability, above 0 and below 1 @param df degrees of freedom, above 0, whole or not
 * @returns t with P(T ≤ t) = p; NaN outside the ranges
 */
export function tQuantile(p: number, df: number): number {
	if (!(p > 0 && p < 1 && df > 0)) return NaN;
	if (p < 0.5) return -tQuantile(1 - p, df);
	const tail = 1 - p;
	let lo = 0;
	let hi = 1;
	while (upperTail(hi, df) > tail && hi < 1e300) hi *= 2;
	for (let i = 0; i < 200 && hi - lo > 1e-15 * hi; i++) {
		const middle = (lo + hi) / 2;
		if (upperTail(middle, df) > tail) lo = middle;
		else hi = middle;
	}
	return (lo + hi) / 2;
}
