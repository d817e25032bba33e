/** What people type into a field for a number, or paste into a table of them. */

/** A comma before three digits may part thousands or be a decimal comma: nobody can tell, so it is not read. */
const EITHER = /^[-+]?\d{1,3},\d{3}$/;

/**
 * The number that a text means: a point or one comma for decimals, blanks between thousands.
 * @returns null for an empty text; NaN for one that is no number or could be two
 */
export function typedNumber(text: string): number | null {
	const plain = text
		.trim()
		.replace(/[\s\u00A0\u2009\u202F']/g, '')
		.replace('−', '-');
	if (plain === '') return null;
	if (EITHER.test(plain)) return NaN;
	const dotted = plain.includes('.') ? plain : plain.replace(',', '.');
	return /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?$/.test(dotted) ? Number(dotted) : NaN;
}

/** One row of a table of two columns, as typed. */
export interface TypedPair {
	x: string;
	y: string;
}

export const isEmptyPair = ({ x, y }: TypedPair): boolean => x.trim() === '' && y.trim() === '';

/** The numbers of the rows that are whole, in their order; for a picture while someone still types. */
export const wholePairs = (rows: readonly TypedPair[]): [x: number, y: number][] =>
	rows.flatMap((row): [number, number][] => {
		const [x, y] = [typedNumber(row.x), typedNumber(row.y)];
		return x === null || y === null || Number.isNaN(x + y) ? [] : [[x, y]];
	});

/**
 * Rows of a pasted text: from a sheet (tabs), a file (semicolons or commas) or a letter (blanks). What cannot be parted stays
 * whole in its first column, so that nothing of it is lost.
 */
export function pastedPairs(text: string): TypedPair[] {
	return text
		.split(/\r?\n/)
		.map((line) => line.trim())
		.filter(Boolean)
		.map((line) => {
			const mark = line.includes('\t') ? '\t' : line.includes(';') ? ';' : /\s/.test(line) ? /,?\s+/ : ',';
			const [x = '', ...rest] = line.split(mark).map((part) => part.trim());
			return { x, y: rest.join(' ') };
		});
}

export const typedPairs = (points: readonly (readonly [x: number, y: number])[]): TypedPair[] =>
	points.map(([x, y]) => ({ x: String(x), y: String(y) }));
