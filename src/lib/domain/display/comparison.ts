import { formatNumber } from './format';
import { labelOf } from './labels';

/** How means of several runs and their differences are written: one digit more than a single run's, since they know more. */
interface Difference {
	value: number;
	ci95: readonly [lo: number, hi: number];
}

interface Compared {
	key: string;
	n: number;
	difference: Difference | null;
}

const scaled = (code: string, value: number) => value * (labelOf(code).percent ? 100 : 1);
const digits = (code: string) => labelOf(code).decimals + 1;

export const meanText = (code: string, value: number): string =>
	formatNumber(scaled(code, value), digits(code));

/** A standard deviation is known to two digits at best; it stands in the decimals of its mean. */
export const intervalText = (code: string, [low, high]: readonly [number, number]): string =>
	`${meanText(code, low)} to ${meanText(code, high)}`;

/** `+1.02`, `−0.30`: a difference always has its sign. */
export function signedText(code: string, value: number): string {
	const text = meanText(code, value);
	return value > 0 && /[1-9]/.test(text) ? `+${text}` : text;
}

/** Unit of a difference: of two percentages it is points. */
export const differenceUnit = (code: string, unit = ''): string =>
	labelOf(code).percent ? 'percentage points' : labelOf(code, unit).unit;

export type Reading = 'higher' | 'lower' | 'not shown' | 'unknown';

/** What a 95 % interval of a difference lets one say. */
export function readingOf(difference: Difference | null): Reading {
	if (!difference) return 'unknown';
	const [low, high] = difference.ci95;
	if (low > 0) return 'higher';
	return high < 0 ? 'lower' : 'not shown';
}

/** The comparison in one sentence; never a verdict without interval and n. */
export function comparisonSentence(code: string, group: Compared, base: { key: string; n: number }): string {
	const { difference } = group;
	const counts = `n = ${group.n} and ${base.n}`;
	if (!difference)
		return `Whether ${group.key} and ${base.key} differ cannot be said: scatter needs two values that differ in each (${counts}).`;
	const unit = differenceUnit(code);
	const interval = `95 % interval ${signedText(code, difference.ci95[0])} to ${signedText(code, difference.ci95[1])}${unit ? ` ${unit}` : ''}, ${counts}`;
	const reading = readingOf(difference);
	if (reading === 'not shown')
		return `No difference between ${group.key} and ${base.key} is shown beyond scatter (${interval}).`;
	const size = meanText(code, Math.abs(difference.value));
	return `${group.key} is ${reading} than ${base.key} by ${size}${unit ? ` ${unit}` : ''} (${interval}): more than scatter.`;
}
