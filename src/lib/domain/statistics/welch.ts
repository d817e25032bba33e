import { tQuantile } from './student-t';

/** What is known of a group of independent values. */
export interface Group {
	n: number;
	mean: number;
	/** Standard deviation (n − 1); null below two values. */
	sd: number | null;
}

export interface Difference {
	/** Mean of the one less mean of the other. */
	value: number;
	/** Standard error of the difference. */
	standardError: number;
	/** Degrees of freedom, as a rule not whole. */
	df: number;
	interval: [lo: number, hi: number];
}

/**
 * Difference of two means with its confidence interval, for groups whose scatter may differ: the standard error is
 * √(s₁²/n₁ + s₂²/n₂), with degrees of freedom (s₁²/n₁ + s₂²/n₂)² / ((s₁²/n₁)²/(n₁ − 1) + (s₂²/n₂)²/(n₂ − 1)).
 * B. L. Welch, Biometrika 34 (1947) 28–35; F. E. Satterthwaite, Biometrics Bulletin 2 (1946) 110–114.
 * @param confidence between 0 and 1; default 0.95
 * @returns null where one of the groups has fewer than two values, or neither scatters: nothing is known of the scatter then
 */
export function welchDifference(one: Group, other: Group, confidence = 0.95): Difference | null {
	if (one.n < 2 || other.n < 2 || one.sd === null || other.sd === null) return null;
	const [a, b] = [one.sd ** 2 / one.n, other.sd ** 2 / other.n];
	const df = (a + b) ** 2 / (a ** 2 / (one.n - 1) + b ** 2 / (other.n - 1));
	if (!(a + b > 0) || !Number.isFinite(df)) return null;
	const value = one.mean - other.mean;
	const standardError = Math.sqrt(a + b);
	const half = tQuantile((1 + confidence) / 2, df) * standardError;
	return { value, standardError, df, interval: [value - half, value + half] };
}
