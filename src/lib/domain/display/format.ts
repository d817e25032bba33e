/**
 * Numbers as people read them: thin spaces between thousands, a true minus, as many digits as the uncertainty allows.
 * Takes SI-side values as stored and returns text; never throws. What is not a finite number becomes `NONE`.
 */

/** U+2009: wide enough to part thousands; figures are never wrapped, so a breaking space does no harm. */
export const THIN = '\u2009';
const MINUS = '\u2212';
/** What stands where there is no value. */
export const NONE = '\u2013';

/**
 * Fixed decimals; negative `decimals` round to tens, hundreds …
 * @param decimals -15 … 20.
 */
export function formatNumber(value: number | null | undefined, decimals: number): string {
	if (value == null || !Number.isFinite(value)) return NONE;
	const step = 10 ** -Math.min(decimals, 0);
	const digits = (Math.round(Math.abs(value) / step) * step).toFixed(0);
	const text = decimals > 0 ? Math.abs(value).toFixed(decimals) : digits;
	const [whole = '0', fraction] = text.split('.');
	const grouped = whole.replace(/\B(?=(\d{3})+(?!\d))/g, THIN);
	const isZero = /^0(\.0*)?$/.test(text);
	return `${value < 0 && !isZero ? MINUS : ''}${grouped}${fraction === undefined ? '' : `.${fraction}`}`;
}

/** A number with the digits it was given, none added and none cut: for limits, settings and facts that someone typed. */
export function plainNumber(value: number): string {
	const [mantissa = '', exponent = '0'] = String(value).split('e');
	const decimals = (mantissa.split('.')[1]?.length ?? 0) - Number(exponent);
	return formatNumber(value, Math.min(20, Math.max(0, decimals)));
}

/** Decimals that show `significant` digits of `value` after rounding (0.0996 to two digits is 0.10, not 0.100). */
export function decimalsOf(value: number, significant: number): number {
	const magnitude = Math.abs(value);
	if (!(magnitude > 0) || !Number.isFinite(magnitude)) return 0;
	const exponent = Number(magnitude.toExponential(significant - 1).split('e')[1]);
	return Math.max(-15, Math.min(20, significant - 1 - exponent));
}

/**
 * Value and expanded uncertainty U (same unit, > 0), both to the decimals of two significant digits of U
 * (JCGM 100:2008, 7.2.6).
 */
export function formatWithUncertainty(value: number, expanded: number): { value: string; plusMinus: string } {
	const decimals = decimalsOf(expanded, 2);
	return { value: formatNumber(value, decimals), plusMinus: formatNumber(expanded, decimals) };
}

/** Bytes in decimal multiples (1 kB = 1 000 B, as SI has it). */
export function formatBytes(bytes: number): string {
	const units = ['B', 'kB', 'MB', 'GB', 'TB'];
	let size = bytes;
	let at = 0;
	while (size >= 999.5 && at < units.length - 1) {
		size /= 1000;
		at++;
	}
	return `${formatNumber(size, at === 0 || size >= 99.5 ? 0 : 1)} ${units[at]}`;
}

/** A length of time in seconds, to what matters: `0.4 s`, `45 s`, `12 min 05 s`, `3 h 20 min`. */
export function formatDuration(seconds: number): string {
	if (!Number.isFinite(seconds) || seconds < 0) return NONE;
	if (seconds < 9.95) return `${formatNumber(seconds, 1)} s`;
	const whole = Math.round(seconds);
	if (whole < 60) return `${whole} s`;
	const [hours, minutes, rest] = [Math.floor(whole / 3600), Math.floor((whole % 3600) / 60), whole % 60];
	const two = (part: number) => String(part).padStart(2, '0');
	return hours > 0 ? `${formatNumber(hours, 0)} h ${two(minutes)} min` : `${minutes} min ${two(rest)} s`;
}

/** A span on the trace clock: `12.00–14.50 s`; a span of one sample is a moment. */
export function formatSpan(fromS: number, toS: number): string {
	const decimals = toS - fromS >= 100 ? 0 : 2;
	const [from, to] = [formatNumber(fromS, decimals), formatNumber(toS, decimals)];
	return from === to ? `at ${from} s` : `${from}–${to} s`;
}

/** `1 run`, `7 runs`, `5 000 runs`. */
export function formatCount(count: number, one: string, many = `${one}s`): string {
	return `${formatNumber(count, 0)} ${count === 1 ? one : many}`;
}
