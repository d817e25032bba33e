import type { Finding } from '../model';
import type { ReadTable } from '../import/read-table';
import type { MappedColumn } from './check-map';

const info = (code: string, message: string, channel?: string): Finding => ({
	code,
	severity: 'info',
	message,
	spans: [],
	channel
});
const warning = (code: string, message: string, channel?: string): Finding => ({
	...info(code, message, channel),
	severity: 'warning'
});

const rowsText = (count: number) => (count === 1 ? 'One row' : `${count} rows`);

function columnFindings(mapped: MappedColumn, rows: number): Finding[] {
	const { source } = mapped;
	const name = mapped.channel ?? source.header;
	const findings: Finding[] = [];
	if (source.numbers === 0 && source.texts > 0) {
		findings.push(
			info(
				'text_column',
				`The column “${source.header}” holds text (row ${source.firstText?.row}: “${source.firstText?.cell}”) and is not kept as a channel.`,
				source.header
			)
		);
		return findings;
	}
	if (source.numbers === 0) {
		findings.push(info('empty_column', `The column “${source.header}” holds no values.`, source.header));
		return findings;
	}
	let marked = 0;
	for (const count of source.missingMarks.values()) marked += count;
	if (marked > 0) {
		const marks = [...source.missingMarks].map(([mark, count]) => `${count} × “${mark}”`).join(', ');
		findings.push(
			warning(
				'missing_marks',
				`${name}: ${marked} of ${rows} values are marks for “no value” (${marks}) and are left out of every figure.`,
				name
			)
		);
	}
	if (source.texts > 0)
		findings.push(
			warning(
				'text_in_numbers',
				`${name}: ${source.texts} of ${rows} cells cannot be read as numbers, first “${source.firstText?.cell}” in row ${source.firstText?.row}; they are left out.`,
				name
			)
		);
	if (source.blanks > 0)
		findings.push(
			info(
				'blank_cells',
				`${name}: ${source.blanks} of ${rows} cells are blank; a slower channel often is. Figures use the ${source.numbers} that are filled.`,
				name
			)
		);
	return findings;
}

/** What the reading of the file has to say: marks for missing values, text among numbers, cut, short and surplus rows, remarks. */
export function importFindings(read: ReadTable, columns: readonly MappedColumn[]): Finding[] {
	const { table, dialect, nulBytes } = read;
	const findings = columns.flatMap((mapped) => columnFindings(mapped, table.rows));
	if (table.cutRow !== null)
		findings.push(
			warning(
				'cut_row',
				`The last row (row ${table.cutRow}) is cut short and is left out. Check that the recording ended as it should.`
			)
		);
	if (table.shortRows > 0)
		findings.push(
			warning(
				'short_rows',
				`${rowsText(table.shortRows)}, first row ${table.firstShortRow}, end before the last column; the cells that are not there count as missing.`
			)
		);
	if (table.longRows > 0)
		findings.push(
			warning(
				'long_rows',
				`${rowsText(table.longRows)}, first row ${table.firstLongRow}, have more cells than there are columns; the surplus is not read. Look whether a delimiter stands inside a value.`
			)
		);
	if (table.repeatedHeaders > 0)
		findings.push(
			info(
				'repeated_header',
				`The header is repeated ${table.repeatedHeaders === 1 ? 'once' : `${table.repeatedHeaders} times`} inside the data; the repeats are left out.`
			)
		);
	if (table.textRows > 0)
		findings.push(
			info(
				'text_rows',
				`${rowsText(table.textRows)} of text, first row ${table.firstTextRow}, stand among or below the samples and are left out.`
			)
		);
	if (table.secondTableRow !== null)
		findings.push(
			warning(
				'second_table',
				`A second table starts in row ${table.secondTableRow}; its ${table.rowsNotRead} rows are not read. Upload it as a file of its own if it matters.`
			)
		);
	if (nulBytes > 0)
		findings.push(
			warning(
				'nul_padding',
				`The file holds ${nulBytes} empty (NUL) bytes, as a logger leaves that lost its power; they are left out. Check that the recording is whole.`
			)
		);
	if (dialect.numbersAssumed)
		findings.push(
			warning(
				'number_format_assumed',
				`Every number with a comma could be read both ways; the comma is taken as ${
					dialect.numbers.decimal === ',' ? 'the decimal mark' : 'a thousands mark'
				}. Check a value against the measuring system.`
			)
		);
	return findings;
}
