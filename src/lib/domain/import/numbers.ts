/**
 * From cells to numbers. One pass over the characters, no objects and no regular expression on the common path,
 * since a trace has millions of cells.
 */

/** How this file writes numbers. */
export interface NumberStyle {
	decimal: '.' | ',';
	/** Marks between groups of three digits; empty when the file has none. */
	thousands: string;
}

/** Cell texts that stand for "no value", in lower case. */
const MISSING = new Set([
	'',
	'nan',
	'-nan',
	'+nan',
	'nan(ind)',
	'-nan(ind)',
	'-',
	'--',
	'---',
	'–',
	'—',
	'n/a',
	'na',
	'#n/a',
	'#na',
	'#div/0!',
	'#div/0',
	'#value!',
	'#wert!',
	'#ref!',
	'#num!',
	'#name?',
	'#null!',
	'null',
	'none',
	'nil',
	'inf',
	'+inf',
	'-inf',
	'infinity',
	'-infinity',
	'∞',
	'1.#qnan',
	'-1.#qnan',
	'1.#inf',
	'-1.#inf',
	'1.#ind',
	'-1.#ind',
	'over',
	'under',
	'overrange',
	'overflow',
	'ol',
	'+ol',
	'-ol',
	'*',
	'**',
	'***',
	'****',
	'*****',
	'?',
	'error',
	'err',
	'invalid',
	'no data',
	'.'
]);

/** Numbers that loggers write for "no value"; they count as missing only where they stand apart from the column's other values. */
export const SENTINELS: readonly number[] = [-9999, -999, -99999, 9999.9, 99999, -9999.9];

/** At or above this size a number is an overflow mark (1E+30), whatever the column. */
export const OVERFLOW = 9.9e29;

export function isMissingMark(cell: string): boolean {
	return MISSING.has(cell.trim().toLowerCase());
}

const POWERS = Array.from({ length: 23 }, (_, exponent) => Number(`1e${exponent}`));
const ZERO = 48;

/**
 * A plain decimal number in the given style, exactly rounded; NaN where the cell is anything else.
 * Up to 15 digits and a power of ten up to 22 the quotient of two exact doubles is the correctly rounded value.
 */
function readPlain(cell: string, decimalCode: number): number {
	let at = 0;
	let end = cell.length;
	while (at < end && cell.charCodeAt(at) <= 32) at++;
	while (end > at && cell.charCodeAt(end - 1) <= 32) end--;
	if (at === end) return NaN;
	let negative = false;
	const sign = cell.charCodeAt(at);
	if (sign === 45 || sign === 43) {
		negative = sign === 45;
		at++;
	}
	let mantissa = 0;
	let digits = 0;
	let scale = -1;
	let seen = 0;
	for (; at < end; at++) {
		const code = cell.charCodeAt(at);
		const digit = code - ZERO;
		if (digit >= 0 && digit <= 9) {
			seen++;
			if (mantissa !== 0 || digit !== 0) digits++;
			mantissa = mantissa * 10 + digit;
			if (scale >= 0) scale++;
		} else if (code === decimalCode && scale < 0) scale = 0;
		else break;
	}
	if (seen === 0) return NaN;
	if (at === end && digits <= 15 && scale <= 22) {
		const value = scale > 0 ? mantissa / POWERS[scale]! : mantissa;
		return negative ? -value : value;
	}
	return readLong(cell.trim(), decimalCode);
}

/** Exponents and more digits than a double holds exactly: the language's own reader, after the form is checked. */
function readLong(cell: string, decimalCode: number): number {
	const text = decimalCode === 44 ? cell.replace(',', '.') : cell;
	if (decimalCode === 44 && cell.includes('.')) return NaN;
	return /^[+-]?(\d+\.?\d*|\.\d+)([eEdD][+-]?\d+)?$/.test(text) ? Number(text.replace(/[dD]/, 'e')) : NaN;
}

const BLANKS = /[\u00a0\u2007\u2009\u202f]/g;

/** `1.234,5`, `1 234,5`, `1'234.5` without their marks; null where the groups are not of three digits. */
function withoutThousands(cell: string, style: NumberStyle): string | null {
	if (style.thousands === '') return null;
	const point = cell.lastIndexOf(style.decimal);
	const whole = point < 0 ? cell : cell.slice(0, point);
	const groups = whole.split(style.thousands);
	if (groups.length < 2 || !/^[+-]?\d{1,3}$/.test(groups[0]!)) return null;
	if (!groups.slice(1).every((group) => /^\d{3}$/.test(group))) return null;
	return groups.join('') + (point < 0 ? '' : cell.slice(point));
}

const WITH_UNIT = /^(['’]?)([+-]?[\d.,][\d.,'’ ]*(?:[eE][+-]?\d+)?)\s*([%°µ\p{L}][\p{L}\d%°µ/³²·*^.-]*)?$/u;

export interface LooseNumber {
	value: number;
	/** The unit written behind the number, if any. */
	suffix: string | null;
}

/** The uncommon forms: thousands marks, odd blanks, a leading apostrophe, a unit behind the number. */
export function readLoose(cell: string, style: NumberStyle): LooseNumber | null {
	const decimalCode = style.decimal === ',' ? 44 : 46;
	let text = cell.replace(BLANKS, ' ').trim().replace('−', '-');
	const marked = WITH_UNIT.exec(text);
	let suffix: string | null = null;
	if (marked) {
		text = marked[2]!.trim();
		suffix = marked[3] ?? null;
		// The letters of an exponent or of a hexadecimal number are no unit.
		if (suffix !== null && /^[xX\d]|^[eE]$/.test(suffix)) return null;
	}
	const plain = withoutThousands(text.replaceAll('’', "'"), style) ?? text;
	const value = readPlain(plain, decimalCode);
	return Number.isNaN(value) ? null : { value, suffix };
}

/**
 * A number in the file's style, by the quick path.
 *
 * @returns NaN where the cell is no plain number (a missing mark, a text, one of the uncommon forms)
 */
export function readNumber(cell: string, style: NumberStyle): number {
	return readPlain(cell, style.decimal === ',' ? 44 : 46);
}

const STRONG_COMMA =
	/^[+-]?(\d+,\d{1,2}|\d+,\d{4,}|\d{4,},\d{3}|0,\d{3}|\d{1,3}(\.\d{3})+,\d+|\d{1,3}([ ']\d{3})+,\d+)([eE][+-]?\d+)?$/;
const STRONG_POINT =
	/^[+-]?(\d*\.\d{1,2}|\d+\.\d{4,}|\d{4,}\.\d{3}|0\.\d{3}|\d{1,3}(,\d{3})+\.\d+|\d{1,3}([ ']\d{3})+\.\d+)([eE][+-]?\d+)?$/;
const AMBIGUOUS_COMMA = /^[+-]?[1-9]\d{0,2},\d{3}$/;
const AMBIGUOUS_POINT = /^[+-]?[1-9]\d{0,2}\.\d{3}$/;
const GROUPED: readonly (readonly [mark: string, form: RegExp])[] = [
	[',', /^[+-]?\d{1,3}(,\d{3})+(\.\d+)?$/],
	['.', /^[+-]?\d{1,3}(\.\d{3})+(,\d+)?$/],
	[' ', /^[+-]?\d{1,3}( \d{3})+([.,]\d+)?$/],
	["'", /^[+-]?\d{1,3}('\d{3})+([.,]\d+)?$/]
];

/** Two or more groups can only be thousands. */
const MANY_COMMAS = /^[+-]?\d{1,3}(,\d{3}){2,}$/;
const MANY_POINTS = /^[+-]?\d{1,3}(\.\d{3}){2,}$/;

/**
 * How a sample of cells writes numbers. A mark counts as a thousands mark only where the decimal mark is known to be
 * the other one and every number that has it is grouped by threes.
 *
 * @returns the style, and whether it had to be assumed because every number could be read both ways
 */
export function sniffNumberStyle(
	cells: readonly string[],
	semicolons: boolean
): NumberStyle & { assumed: boolean } {
	let comma = 0;
	let point = 0;
	let ambiguousComma = 0;
	let ambiguousPoint = 0;
	const clean: string[] = [];
	for (const raw of cells) {
		const cell = raw.replace(BLANKS, ' ').replaceAll('’', "'").trim();
		if (!/^[+-]?\d[\d.,' ]*([eE][+-]?\d+)?$/.test(cell)) continue;
		clean.push(cell);
		if (STRONG_COMMA.test(cell) || MANY_POINTS.test(cell)) comma++;
		else if (STRONG_POINT.test(cell) || MANY_COMMAS.test(cell)) point++;
		else if (AMBIGUOUS_COMMA.test(cell)) ambiguousComma++;
		else if (AMBIGUOUS_POINT.test(cell)) ambiguousPoint++;
	}
	const assumed = comma === 0 && point === 0 && ambiguousComma > 0;
	const decimal =
		comma > point || (comma === point && semicolons && ambiguousComma > ambiguousPoint) ? ',' : '.';
	let thousands = '';
	for (const [mark, form] of GROUPED) {
		if (mark === decimal) continue;
		const having = clean.filter((cell) => cell.includes(mark));
		if (having.length > 0 && having.every((cell) => form.test(cell))) thousands = mark;
	}
	return { decimal, thousands, assumed };
}
