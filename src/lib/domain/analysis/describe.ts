import { splitHeader } from '../channels/split-header';
import { openTable } from '../import/read-table';

export interface DescribedFile {
	ok: true;
	/** Lines before the header. */
	preamble: string[];
	headers: string[];
	units: (string | null)[];
	/** First rows as they are written, cut to the columns. */
	rows: string[][];
	delimiter: string;
	decimal: '.' | ',';
}

const PREVIEW_ROWS = 20;

/**
 * What a file holds, for a preview: the same reading as the import's, of the first rows only.
 *
 * @returns headers, units and up to 20 rows as text, or the refusal that the import would give
 */
export function describeFile(bytes: Uint8Array): DescribedFile | { ok: false; error: string } {
	const opened = openTable(bytes);
	if (!opened.ok) return opened;
	const { layout, dialect, head } = opened;
	return {
		ok: true,
		preamble: layout.preamble,
		headers: layout.headers,
		units: layout.headers.map((header, at) => splitHeader(header).unit ?? layout.unitCells[at] ?? null),
		rows: head
			.slice(layout.dataRecord)
			.filter((row) => row.some((cell) => cell.trim() !== ''))
			.slice(0, PREVIEW_ROWS)
			.map((row) => layout.headers.map((_, at) => (row[at] ?? '').trim())),
		delimiter: dialect.delimiter,
		decimal: dialect.numbers.decimal
	};
}
