import { parseUnit, refusedUnit } from '../units/parse';
import type { Dialect } from './dialect';
import { isMissingMark, readLoose } from './numbers';
import { clockForm, type ClockForm } from './time';

export interface Layout {
	/** Lines before the header, as text, with their cells joined by ` | `. */
	preamble: string[];
	/** Names of the columns as the file has them; `column 3` where it names none. */
	headers: string[];
	/** Units from a row of their own; null where there is none. */
	unitCells: (string | null)[];
	/** Index of the header record; null in a file without one. */
	headerRecord: number | null;
	/** Records between header and data (units, types) as read, so that repeats of them are known. */
	headRecords: string[][];
	/** Index of the first record of data. */
	dataRecord: number;
	/** Cells in a usual record of data. */
	width: number;
	/** `number`, or how the clock of the column is written. */
	forms: ('number' | ClockForm)[];
}

export type LayoutResult = { ok: true; layout: Layout } | { ok: false; error: string };

/** More columns than any measuring system records in one table; a wrong delimiter or a hostile file. */
const MOST_COLUMNS = 1000;

const filled = (row: readonly string[]) => row.filter((cell) => cell.trim() !== '');

function widthOf(row: readonly string[]): number {
	let width = row.length;
	while (width > 0 && row[width - 1]!.trim() === '') width--;
	return width;
}

function commonWidth(rows: readonly (readonly string[])[]): number {
	const counts = new Map<number, number>();
	for (const row of rows)
		if (filled(row).length > 0) counts.set(row.length, (counts.get(row.length) ?? 0) + 1);
	return [...counts].sort((a, b) => b[1] - a[1] || b[0] - a[0])[0]?.[0] ?? 0;
}

const isValue = (cell: string, dialect: Dialect) =>
	readLoose(cell, dialect.numbers) !== null || clockForm(cell) !== null;

/** Cells filled, and how many of them are numbers or times. */
function contents(
	row: readonly string[],
	dialect: Dialect
): { cells: number; values: number; missing: number } {
	let cells = 0;
	let values = 0;
	let missing = 0;
	for (const cell of row) {
		if (cell.trim() === '') continue;
		cells++;
		if (isValue(cell, dialect)) values++;
		else if (isMissingMark(cell)) missing++;
	}
	return { cells, values, missing };
}

function isData(row: readonly string[], width: number, dialect: Dialect): boolean {
	if (row.length < 0.7 * width) return false;
	const { cells, values, missing } = contents(row, dialect);
	if (values === 0 || cells < Math.min(2, width)) return false;
	return values + missing > 0.5 * cells;
}

const isUnitCell = (cell: string) =>
	parseUnit(cell) !== null || refusedUnit(cell) !== null || /^\[.*\]$/.test(cell.trim());

/** A row that mostly holds units; `-` alone counts only beside real ones. */
function isUnitRow(row: readonly string[]): boolean {
	const cells = filled(row);
	const units = cells.filter((cell) => isUnitCell(cell));
	return units.length >= 0.6 * cells.length && units.some((cell) => !/^[-–—]+$/.test(cell.trim()));
}

/** The text rows right above the data, nearest last: header, units, types. */
function headRows(rows: readonly (readonly string[])[], dataRecord: number, width: number): number[] {
	const found: number[] = [];
	for (let at = dataRecord - 1; at >= 0 && found.length < 4; at--) {
		const cells = filled(rows[at]!).length;
		if (cells === 0) {
			if (found.length > 0) break;
			continue;
		}
		if (cells < Math.min(2, width) || widthOf(rows[at]!) < 0.5 * width) break;
		found.unshift(at);
	}
	return found;
}

/** Which of the text rows names the columns and which gives units. */
function chooseHead(
	rows: readonly (readonly string[])[],
	head: readonly number[]
): { header: number; units: number | null } {
	if (head.length === 1) return { header: head[0]!, units: null };
	for (let k = head.length - 1; k > 0; k--)
		if (isUnitRow(rows[head[k]!]!)) return { header: head[k - 1]!, units: head[k]! };
	return { header: head.at(-1)!, units: null };
}

const mended = (text: string) =>
	text
		.replace(/Â(?=[°µ²³·])/g, '')
		.replace(/[\u00a0\u2007\u202f]/g, ' ')
		.replace(/\s+/g, ' ')
		.trim();

function formOf(column: number, data: readonly (readonly string[])[]): 'number' | ClockForm {
	const counts = new Map<ClockForm, number>();
	let cells = 0;
	for (const row of data) {
		const cell = row[column] ?? '';
		if (cell.trim() === '' || isMissingMark(cell)) continue;
		cells++;
		const form = clockForm(cell);
		if (form) counts.set(form, (counts.get(form) ?? 0) + 1);
	}
	const best = [...counts].sort((a, b) => b[1] - a[1])[0];
	return best && best[1] > 0.8 * cells ? best[0] : 'number';
}

const joined = (row: readonly string[]) => filled(row).map(mended).join(' | ');

/**
 * Finds preamble, header row, optional unit row and first row of data in the first records of a table.
 *
 * @param rows the first records, some hundred, as the delimiter cuts them
 * @returns the layout, or a refusal where there is no table of rows to read
 */
export function findLayout(rows: readonly (readonly string[])[], dialect: Dialect): LayoutResult {
	const width = commonWidth(rows);
	let dataRecord = rows.findIndex((row) => isData(row, width, dialect));
	if (dataRecord < 0) {
		// No row of numbers: the first full row is taken for the header, so that the refusal can name the columns.
		const header = rows.findIndex(
			(row) => filled(row).length >= Math.min(2, width) && row.length >= 0.7 * width
		);
		const after = rows.findIndex((row, at) => at > header && filled(row).length > 0);
		if (header < 0 || after < 0) return { ok: false, error: noRows(rows, dialect) };
		dataRecord = after;
	}
	const head = headRows(rows, dataRecord, width);
	const data = rows.slice(dataRecord);
	const dataWidth = Math.max(...data.slice(0, 50).map((row) => widthOf(row)), 1);
	if (dataWidth > MOST_COLUMNS || width > MOST_COLUMNS)
		return {
			ok: false,
			error: `The file has ${Math.max(dataWidth, width)} columns; more than ${MOST_COLUMNS} cannot be read. Export only the channels that this run needs.`
		};
	if (head.length === 0) {
		const headers = Array.from({ length: dataWidth }, (_, column) => `column ${column + 1}`);
		const preamble = rows.slice(0, dataRecord).map(joined).filter(Boolean);
		return {
			ok: true,
			layout: {
				preamble,
				headers,
				unitCells: headers.map(() => null),
				headerRecord: null,
				headRecords: [],
				dataRecord,
				width: commonWidth(data),
				forms: headers.map((_, column) => formOf(column, data))
			}
		};
	}
	return fromHead(rows, head, dataRecord, dataWidth);
}

function fromHead(
	rows: readonly (readonly string[])[],
	head: readonly number[],
	dataRecord: number,
	dataWidth: number
): LayoutResult {
	const { header, units } = chooseHead(rows, head);
	const data = rows.slice(dataRecord);
	const names = rows[header]!;
	const named = widthOf(names);
	const wider = data.slice(0, 50).filter((row) => widthOf(row) > Math.max(named, names.length));
	// A few rows with a cell too many are counted; where most have more the columns cannot be told.
	if (wider.length > 0.5 * Math.min(50, data.length)) return { ok: false, error: tooWide(dataWidth, named) };
	const columns = Math.max(named, Math.min(dataWidth, names.length));
	const headers = Array.from({ length: columns }, (_, at) => mended(names[at] ?? '') || `column ${at + 1}`);
	const unitRow = units === null ? [] : rows[units]!;
	return {
		ok: true,
		layout: {
			preamble: rows
				.slice(0, head[0])
				.concat(head.filter((at) => at < header).map((at) => rows[at]!))
				.map(joined)
				.filter(Boolean),
			headers,
			unitCells: headers.map((_, at) => mended(unitRow[at] ?? '') || null),
			headerRecord: header,
			headRecords: head.map((at) => [...rows[at]!]),
			dataRecord,
			width: commonWidth(data),
			forms: headers.map((_, column) => formOf(column, data))
		}
	};
}

export const NO_TABLE =
	'No table was found in the file: no row holds numbers in columns. Export the samples with one row per sample, columns separated by comma, semicolon, tab or pipe.';

function noRows(rows: readonly (readonly string[])[], dialect: Dialect): string {
	const only = rows.find((row) => filled(row).length > 0) ?? [];
	if (filled(only).length >= 2 && !contents(only, dialect).values)
		return `The file has a header (${joined(only).slice(0, 120)}) but no rows of samples below it. Check that the recording ran, export it again and upload that file.`;
	return NO_TABLE;
}

function tooWide(dataWidth: number, named: number): string {
	const comma =
		dataWidth >= 2 * named - 1
			? ' Numbers seem to be written with a decimal comma and separated by commas too: export with semicolons or with a decimal point.'
			: ' Give every column a name, or export the table again.';
	return `Rows have ${dataWidth} cells but the header names only ${named} columns, so it is not certain which is which.${comma}`;
}
