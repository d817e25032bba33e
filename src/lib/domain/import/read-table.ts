import Papa from 'papaparse';
import { decode } from './decode';
import { sniffDialect, type Dialect } from './dialect';
import { findLayout, NO_TABLE, type Layout } from './layout';
import { TableBuilder, type Table } from './table';

export interface ReadTable {
	ok: true;
	table: Table;
	layout: Layout;
	dialect: Dialect;
	/** NUL bytes left out of the file. */
	nulBytes: number;
}
export type ReadTableResult = ReadTable | { ok: false; error: string };

/** Records from which the layout is told: past any usual preamble. */
const LAYOUT_RECORDS = 400;
/** Small enough that a piece's cells are gone before they grow old, which is what collecting them costs. */
const CHUNK_CHARACTERS = 1 << 18;

/** One kind of line end for the whole text; a file with several is brought to `\n`. */
function evenLines(text: string): { text: string; newline: '\n' | '\r' | '\r\n' } {
	let pairs = 0;
	let feeds = 0;
	for (let at = text.indexOf('\n'); at >= 0; at = text.indexOf('\n', at + 1)) {
		feeds++;
		if (text.charCodeAt(at - 1) === 13) pairs++;
	}
	if (feeds === 0) return { text, newline: text.includes('\r') ? '\r' : '\n' };
	if (pairs === feeds) return { text, newline: '\r\n' };
	if (pairs === 0) return { text, newline: '\n' };
	return { text: text.replace(/\r\n?/g, '\n'), newline: '\n' };
}

/** A record longer than this is an open quotation mark that runs through the file. */
const LONGEST_RECORD = 1 << 22;

const UNCLOSED =
	'A quotation mark opens near the end of what could be read and never closes, so the rows after it cannot be told apart. Export the file again, or remove the mark.';

const NO_ROWS =
	'The file has a header but no rows of samples below it. Check that the recording ran, export it again and upload that file.';

interface Opened {
	ok: true;
	text: string;
	newline: '\n' | '\r' | '\r\n';
	dialect: Dialect;
	layout: Layout;
	/** The first records, as cut by the delimiter. */
	head: string[][];
	nulBytes: number;
}

/**
 * Decodes a file and finds how it is laid out, without reading all of its rows.
 *
 * @returns dialect, layout and the first records, or a refusal that says what is wrong and what to do
 */
export function openTable(bytes: Uint8Array): Opened | { ok: false; error: string } {
	const decoded = decode(bytes);
	if (!decoded.ok) return decoded;
	const dialect = sniffDialect(decoded.text);
	const { text, newline } = evenLines(dialect.skip > 0 ? decoded.text.slice(dialect.skip) : decoded.text);
	const head = Papa.parse<string[]>(text, {
		delimiter: dialect.delimiter,
		newline,
		preview: LAYOUT_RECORDS
	}).data;
	const found = findLayout(head, dialect);
	if (!found.ok) return found;
	return { ok: true, text, newline, dialect, layout: found.layout, head, nulBytes: decoded.nulBytes };
}

/**
 * Cuts the text into records, a piece at a time, so that no more than a piece of cells is ever held.
 *
 * @returns false where a quotation mark never closes
 */
function inPieces(text: string, config: Papa.ParseConfig, take: (rows: string[][]) => void): boolean {
	const parser = new Papa.Parser(config);
	let rest = '';
	for (let at = 0; at < text.length; at += CHUNK_CHARACTERS) {
		const last = at + CHUNK_CHARACTERS >= text.length;
		const piece = rest + text.slice(at, at + CHUNK_CHARACTERS);
		const { data, errors, meta } = parser.parse(piece, 0, !last) as Papa.ParseResult<string[]>;
		if (errors.some((error) => error.code === 'MissingQuotes')) return false;
		take(data);
		// The last record of a piece may go on in the next one.
		rest = last ? '' : piece.slice(meta.cursor);
		if (rest.length > LONGEST_RECORD) return false;
	}
	return true;
}

/** Rows by the length of the first ones, a little generously. */
function expectedRows({ text, head, layout }: Opened): number {
	const rows = head.slice(layout.dataRecord);
	const cells = rows.reduce((sum, row) => sum + row.reduce((length, cell) => length + cell.length + 1, 0), 0);
	if (rows.length < LAYOUT_RECORDS / 2) return rows.length + 16;
	return (1.05 * text.length * rows.length) / Math.max(cells, 1) + 16;
}

/**
 * Reads a whole file into columns of numbers, in pieces.
 *
 * @param bytes the file as uploaded
 * @returns the table with its counts, or a refusal that says what is wrong and what to do
 */
export function readTable(bytes: Uint8Array): ReadTableResult {
	const opened = openTable(bytes);
	if (!opened.ok) return opened;
	const { text, newline, dialect, layout, nulBytes } = opened;
	const builder = new TableBuilder(layout, dialect, expectedRows(opened));
	const wellFormed = inPieces(text, { delimiter: dialect.delimiter, newline }, (rows) =>
		builder.addRows(rows)
	);
	if (!wellFormed) return { ok: false, error: UNCLOSED };
	const table = builder.finish();
	if (table.rows === 0) return { ok: false, error: table.textRows > 0 ? NO_TABLE : NO_ROWS };
	return { ok: true, table, layout, dialect, nulBytes };
}
