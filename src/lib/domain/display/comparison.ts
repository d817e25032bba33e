import { shownLabel } from './figure';
import { formatNumber } from './format';
import type { UnitSystem } from './unit-system';

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

/** The reader's units; `as` of a mean moves the zero of a temperature, that of a difference or a scatter does not. */
function text(code: string, internal: number, system: UnitSystem, kind: 'value' | 'difference'): string {
	const { decimals, percent, as } = shownLabel(code, undefined, system);
	return formatNumber(as[kind](internal) * (percent ? 100 : 1), decimals + 1);
}

export const meanText = (code: string, value: number, system: UnitSystem = 'si'): string =>
	text(code, value, system, 'value');

/** A scatter is a difference; it stands in the decimals of its mean. */
export const scatterText = (code: string, value: number, system: UnitSystem = 'si'): string =>
	text(code, value, system, 'difference');

export const intervalText = (
	code: string,
	[low, high]: readonly [number, number],
	system: UnitSystem = 'si'
): string => `${meanText(code, low, system)} to ${meanText(code, high, system)}`;

/** `+1.02`, `−0.30`: a difference always has its sign. */
export function signedText(code: string, value: number, system: UnitSystem = 'si'): string {
	const said = scatterText(code, value, system);
	return value > 0 && /[1-9]/.test(said) ? `+${said}` : said;
}

/** Unit of a difference: of two percentages it is points. */
export function differenceUnit(code: string, unit = '', system: UnitSystem = 'si'): string {
	const label = shownLabel(code, unit, system);
	return label.percent ? 'percentage points' : label.unit;
}

export type Reading = 'higher' | 'lower' | 'not shown' | 'unknown';

/** What a 95 % interval of a difference lets one say. */
export function readingOf(difference: Difference | null): Reading {
	if (!difference) return 'unknown';
	const [low, high] = difference.ci95;
	if (low > 0) return 'higher';
	return high < 0 ? 'lower' : 'not shown';
}

/** The comparison in one sentence; never a verdict without interval and n. */
export function comparisonSentence(
	code: string,
	group: Compared,
	base: { key: string; n: number },
	system: UnitSystem = 'si'
): string {
	const { difference } = group;
	const counts = `n = ${group.n} and ${base.n}`;
	if (!difference)
		return `Whether ${group.key} and ${base.key} differ cannot be said: scatter needs two values that differ in each (${counts}).`;
	const unit = differenceUnit(code, '', system);
	const interval = `95 % interval ${signedText(code, difference.ci95[0], system)} to ${signedText(code, difference.ci95[1], system)}${unit ? ` ${unit}` : ''}, ${counts}`;
	const reading = readingOf(difference);
	if (reading === 'not shown')
		return `No difference between ${group.key} and ${base.key} is shown beyond scatter (${interval}).`;
	const size = scatterText(code, Math.abs(difference.value), system);
	return `${group.key} is ${reading} than ${base.key} by ${size}${unit ? ` ${unit}` : ''} (${interval}): more than scatter.`;
}
