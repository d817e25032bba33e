import type { Recording } from './rig';

/** How a measuring system writes its file. */
export interface Dialect {
	delimiter: ',' | ';' | '\t';
	decimal: '.' | ',';
	/** Where the unit stands: in the header's own brackets, or in a row of its own. */
	units: 'header' | 'parentheses' | 'row' | 'none';
	preamble: readonly string[];
	quoted: boolean;
	newline: '\n' | '\r\n';
	encoding: 'utf8' | 'utf8-bom' | 'latin1';
}

export interface FileColumn {
	/** Channel of the recording. */
	code: string;
	header: string;
	/** Unit as the file names it; decides the conversion. */
	unit: string;
	digits: number;
}

const plain: Dialect = {
	delimiter: ',',
	decimal: '.',
	units: 'header',
	preamble: [],
	quoted: false,
	newline: '\n',
	encoding: 'utf8'
};

export const DIALECTS = {
	plain,
	unitRow: { ...plain, units: 'row', newline: '\r\n', encoding: 'utf8-bom' },
	decimalComma: {
		...plain,
		delimiter: ';',
		decimal: ',',
		units: 'row',
		newline: '\r\n',
		encoding: 'latin1'
	},
	quotedUs: { ...plain, units: 'parentheses', quoted: true, newline: '\r\n' },
	tabs: { ...plain, delimiter: '\t' },
	bare: { ...plain, units: 'none' }
} as const satisfies Record<string, Dialect>;

/** From the laboratory's unit to the file's; a unit that is not listed is the laboratory's own under another spelling. */
const CONVERSIONS: Readonly<Record<string, (value: number) => number>> = {
	'lb-ft': (nm) => nm / 1.3558179483314,
	'lb/hr': (kgH) => kgH / 0.45359237,
	'lb/min': (kgH) => kgH / 0.45359237 / 60,
	F: (celsius) => celsius * 1.8 + 32,
	psia: (kpa) => kpa / 6.894757293168,
	inHg: (kpa) => kpa / 3.386388640341,
	mbar: (kpa) => kpa * 10,
	bar: (kpa) => kpa / 100,
	'g/s': (kgH) => kgH / 3.6
};

/** Writes the columns of a recording as a measuring system would. @throws when the recording lacks a channel */
export function writeTraceFile(
	recording: Recording,
	columns: readonly FileColumn[],
	dialect: Dialect
): Buffer {
	const { delimiter, decimal, quoted } = dialect;
	const cell = (text: string) => (quoted ? `"${text}"` : text);
	const number = (value: number, digits: number) => {
		const text = value.toFixed(digits);
		return cell(decimal === ',' ? text.replace('.', ',') : text);
	};
	const sources = columns.map(({ code, unit, digits }) => {
		const values = recording.get(code);
		if (!values) throw new Error(`the recording has no channel ${code}`);
		return { values, convert: CONVERSIONS[unit] ?? ((value: number) => value), digits };
	});
	const lines = [
		...dialect.preamble,
		columns.map((column) => cell(headerOf(column, dialect))).join(delimiter)
	];
	if (dialect.units === 'row') lines.push(columns.map(({ unit }) => cell(unit)).join(delimiter));
	const rows = recording.get('time')!.length;
	for (let i = 0; i < rows; i++)
		lines.push(
			sources.map(({ values, convert, digits }) => number(convert(values[i]!), digits)).join(delimiter)
		);
	const text = lines.join(dialect.newline) + dialect.newline;
	if (dialect.encoding === 'latin1') return Buffer.from(text, 'latin1');
	return Buffer.from(dialect.encoding === 'utf8-bom' ? `\uFEFF${text}` : text, 'utf8');
}

function headerOf({ header, unit }: FileColumn, { units }: Dialect): string {
	if (units === 'header') return `${header} [${unit}]`;
	return units === 'parentheses' ? `${header} (${unit})` : header;
}
