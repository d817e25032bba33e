import Papa from 'papaparse';
import { isMissingMark, sniffNumberStyle, type NumberStyle } from './numbers';
import { clockForm } from './time';

/** How a text file separates its cells and writes its numbers. */
export interface Dialect {
	delimiter: string;
	numbers: NumberStyle;
	/** Every number could be read both with a decimal comma and with a thousands comma. */
	numbersAssumed: boolean;
	/** Characters of a leading `sep=;` line, which is no data. */
	skip: number;
}

const DELIMITERS = [',', ';', '\t', '|'] as const;
const SAMPLE_CHARACTERS = 1 << 16;
const NUMBER_LIKE = /^['’]?[+-]?[\d.,][\d.,'’\s]*(?:[eE][+-]?\d+)?\s*[%\p{L}°µ]{0,6}$/u;

function looksLikeValue(cell: string): boolean {
	return NUMBER_LIKE.test(cell.trim()) || isMissingMark(cell) || clockForm(cell) !== null;
}

function mostCommon(widths: readonly number[]): number {
	const counts = new Map<number, number>();
	for (const width of widths) counts.set(width, (counts.get(width) ?? 0) + 1);
	return [...counts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
}

/** How well a delimiter cuts the sample into a table of values: 0 (not at all) to about 1, a little more for many columns. */
function score(sample: string, delimiter: string): number {
	const rows = Papa.parse<string[]>(sample, { delimiter }).data.filter((row) =>
		row.some((cell) => cell.trim())
	);
	// Preamble lines come first; the later half shows the table.
	const body = rows.slice(Math.floor(rows.length / 2));
	const width = mostCommon(body.map((row) => row.length));
	if (width < 2) return 0;
	const regular = body.filter((row) => row.length === width);
	const cells = regular.flat();
	const values = cells.filter(looksLikeValue).length / cells.length;
	return (regular.length / body.length) * (0.1 + values) * (1 + 0.02 * Math.min(width, 20));
}

/** The sample ends at a whole line, so that a cut row does not count against a delimiter. */
function sampleOf(text: string): string {
	if (text.length <= SAMPLE_CHARACTERS) return text;
	const head = text.slice(0, SAMPLE_CHARACTERS);
	const end = Math.max(head.lastIndexOf('\n'), head.lastIndexOf('\r'));
	return end > 0 ? head.slice(0, end + 1) : head;
}

/**
 * Finds delimiter and number style of a text table: comma, semicolon, tab or pipe; decimal point or comma; thousands
 * marks only where they are used consistently. A leading `sep=` line is obeyed.
 */
export function sniffDialect(text: string): Dialect {
	const told = /^\s*"?sep=(.)"?[ \t]*(\r\n|\n|\r)/i.exec(text.slice(0, 40));
	const skip = told?.[0].length ?? 0;
	const sample = sampleOf(text.slice(skip));
	const best = DELIMITERS.map((delimiter) => ({ delimiter, score: score(sample, delimiter) })).sort(
		(a, b) => b.score - a.score
	)[0]!;
	const delimiter = told?.[1] ?? (best.score > 0 ? best.delimiter : ',');
	const rows = Papa.parse<string[]>(sample, { delimiter }).data;
	const cells = rows.slice(Math.floor(rows.length / 4)).flat();
	const { assumed, ...numbers } = sniffNumberStyle(cells, delimiter === ';');
	return { delimiter, numbers, numbersAssumed: assumed, skip };
}
