import Papa from 'papaparse';
import { decode } from './decode';
import { sniffDialect, type Dialect } from './dialect';
import { findLayout, type Layout } from './layout';
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
const CHUNK_CHARACTERS = 1 << 22;

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

const UNCLOSED =
	'A quotation mark opens near the end of what could be read and never closes, so the rows after it cannot be told apart. Export the file again, or remove the mark.';

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
 * Reads a whole file into columns of numbers, in pieces.
 *
 * @param bytes the file as uploaded
 * @returns the table with its counts, or a refusal that says what is wrong and what to do
 */
export function readTable(bytes: Uint8Array): ReadTableResult {
	const opened = openTable(bytes);
	if (!opened.ok) return opened;
	const { text, newline, dialect, layout, nulBytes } = opened;
	const builder = new TableBuilder(layout, dialect);
	let unclosed = false;
	let table: Table | null = null;
	Papa.parse<string[]>(text, {
		delimiter: dialect.delimiter,
		newline,
		chunkSize: CHUNK_CHARACTERS,
		chunk: ({ data, errors }: Papa.ParseResult<string[]>) => {
			if (errors.some((error) => error.code === 'MissingQuotes')) unclosed = true;
			builder.addRows(data);
		},
		complete: () => {
			table = builder.finish();
		}
	});
	if (unclosed) return { ok: false, error: UNCLOSED };
	table ??= builder.finish();
	if (table.rows === 0)
		return {
			ok: false,
			error:
				'The file has a header but no rows of samples below it. Check that the recording ran, export it again and upload that file.'
		};
	return { ok: true, table, layout, dialect, nulBytes };
}
