import { describe, expect, it } from 'vitest';
import { readTable, type ReadTable } from './read-table';

function read(text: string): ReadTable {
	const result = readTable(new TextEncoder().encode(text));
	if (!result.ok) throw new Error(result.error);
	return result;
}
const headers = (text: string) => read(text).table.columns.map(({ header }) => header);
const values = (text: string, column: number) => Array.from(read(text).table.columns[column]!.values);
const refusal = (text: string) => {
	const result = readTable(new TextEncoder().encode(text));
	return result.ok ? '' : result.error;
};

describe('delimiters and number styles', () => {
	it.each([
		['comma', 'time [s],n [rpm]\n0.0,1000.5\n0.1,1001.5\n'],
		['semicolon and decimal comma', 'time [s];n [rpm]\n0,0;1000,5\n0,1;1001,5\n'],
		['tab', 'time [s]\tn [rpm]\n0.0\t1000.5\n0.1\t1001.5\n'],
		['pipe', 'time [s]|n [rpm]\n0.0|1000.5\n0.1|1001.5\n'],
		['quoted decimal commas between commas', '"time [s]","n [rpm]"\n"0,0","1.000,5"\n"0,1","1.001,5"\n'],
		['a sep= line', 'sep=|\ntime [s]|n [rpm]\n0.0|1000.5\n0.1|1001.5\n'],
		['CRLF and LF mixed', 'time [s],n [rpm]\r\n0.0,1000.5\n0.1,1001.5\r\n'],
		['CR alone', 'time [s],n [rpm]\r0.0,1000.5\r0.1,1001.5\r'],
		['no line end at the end', 'time [s],n [rpm]\n0.0,1000.5\n0.1,1001.5'],
		['a trailing delimiter', 'time [s],n [rpm],\n0.0,1000.5,\n0.1,1001.5,\n'],
		['thousands marks', 'time [s];n [rpm]\n0,0;1.000,5\n0,1;1.001,5\n']
	])('%s', (_, text) => {
		expect(headers(text)).toEqual(['time [s]', 'n [rpm]']);
		expect(values(text, 0)).toEqual([0, 0.1]);
		expect(values(text, 1)).toEqual([1000.5, 1001.5]);
	});

	it('refuses decimal commas between commas without quotes', () =>
		expect(refusal('time,n,T\n0,0,1000,5,20,1\n0,1,1001,5,20,2\n0,2,1002,5,20,3\n')).toMatch(
			/decimal comma/
		));
	it('refuses a quotation mark that never closes', () =>
		expect(refusal('time [s],n [rpm]\n0.0,1000\n0.1,"1001\n0.2,1002\n')).toMatch(/quotation mark/));
	it('refuses more columns than any table of samples has', () => {
		const row = Array.from({ length: 1200 }, (_, i) => i).join(',');
		expect(refusal(`${row}\n${row}\n${row}\n`)).toMatch(/1200 columns/);
	});
});

describe('layout', () => {
	const body = '0.0,1000,20.5\n0.1,1010,20.6\n0.2,1020,20.7\n';

	it('keeps preamble lines', () => {
		const { layout } = read(
			`Test bed 3\nOperator,M. Bell\nBarometer,100.9,kPa\n\ntime [s],n [rpm],T [Nm]\n${body}`
		);
		expect(layout.preamble).toEqual(['Test bed 3', 'Operator | M. Bell', 'Barometer | 100.9 | kPa']);
		expect(layout.headers).toEqual(['time [s]', 'n [rpm]', 'T [Nm]']);
	});
	it('finds a unit row', () => {
		const { table } = read(`Time,Speed,Torque\ns,1/min,Nm\n${body}`);
		expect(table.columns.map(({ header, unitCell }) => [header, unitCell])).toEqual([
			['Time', 's'],
			['Speed', '1/min'],
			['Torque', 'Nm']
		]);
		expect(table.rows).toBe(3);
	});
	it('finds units in brackets and a row of types below them', () => {
		const { table } = read(`Time,Speed,Torque\n[s],[rpm],[N·m]\nfloat,float,float\n${body}`);
		expect(table.columns.map(({ header, unitCell }) => `${header} ${unitCell}`)).toEqual([
			'Time [s]',
			'Speed [rpm]',
			'Torque [N·m]'
		]);
	});
	it('reads a table without a header under numbers', () =>
		expect(headers(body)).toEqual(['column 1', 'column 2', 'column 3']));
	it('mends mojibake and odd blanks in headers', () =>
		expect(headers('time\u00a0 [s],T_oil [Â°C]\n0,80\n1,81\n')).toEqual(['time [s]', 'T_oil [°C]']));
	it('keeps an unnamed index column', () =>
		expect(headers('time [s],,n [rpm]\n0,1,900\n1,2,901\n')).toEqual(['time [s]', 'column 2', 'n [rpm]']));
	it('takes a unit behind the numbers', () =>
		expect(read('time [s],P\n0,12.3 kW\n1,12.4 kW\n').table.columns[1]!.unitCell).toBe('kW'));
});

describe('what is counted', () => {
	it('repeated headers', () => {
		const { table } = read('time [s],n [rpm]\n0,900\n1,901\ntime [s],n [rpm]\n2,902\n');
		expect([table.rows, table.repeatedHeaders]).toEqual([3, 1]);
	});
	it('short and long rows, and a cut last row', () => {
		const { table } = read('time [s],n [rpm],T [Nm]\n0,900,1\n1,901\n2,902,3,99\n3,903,4\n4,9');
		expect(table).toMatchObject({
			rows: 4,
			shortRows: 1,
			firstShortRow: 3,
			longRows: 1,
			firstLongRow: 4,
			cutRow: 6
		});
		expect(table.columns[2]!.numbers).toBe(3);
		expect(Array.from(table.rowNumbers)).toEqual([2, 3, 4, 5]);
	});
	it('footers and remarks', () => {
		const { table } = read('time [s],n [rpm]\n0,900\n1,901\n2,902\nMean,901\nEnd of file\n');
		expect([table.rows, table.textRows, table.firstTextRow]).toEqual([3, 2, 5]);
	});
	it('a second table below, which is not read', () => {
		const { table } = read('time [s],n [rpm]\n0,900\n1,901\n\nName,Value\nfoo,3\nbar,4\n');
		expect(table).toMatchObject({ rows: 2, secondTableRow: 5, rowsNotRead: 2 });
	});
	it('marks for “no value” by kind, and blanks apart from them', () => {
		const { table } = read('time [s],a [kPa]\n0,100\n1,NaN\n2,\n3,#N/A\n4,NaN\n5,1E+30\n6,103\n');
		const column = table.columns[1]!;
		expect(column.blanks).toBe(1);
		expect([...column.missingMarks]).toEqual([
			['NaN', 2],
			['#N/A', 1],
			['1E+30', 1]
		]);
		expect(Array.from(column.values)).toEqual([100, NaN, NaN, NaN, NaN, NaN, 103]);
	});
	it('-9999 where it stands apart, and 9999.9 as a speed among speeds', () => {
		const apart = read('time [s],a [kPa]\n0,100\n1,-9999\n2,101\n').table.columns[1]!;
		expect([...apart.missingMarks]).toEqual([['-9999', 1]]);
		const speeds = read('time [s],n [rpm]\n0,9998.1\n1,9999.9\n2,10002.3\n').table.columns[1]!;
		expect(speeds.missingMarks.size).toBe(0);
		expect(Array.from(speeds.values)).toEqual([9998.1, 9999.9, 10002.3]);
	});
	it('text among numbers, with the first of it', () => {
		const column = read('time [s],a [kPa]\n0,100\n1,off\n2,0x1F\n3,103\n').table.columns[1]!;
		expect(column).toMatchObject({ texts: 2, firstText: { row: 3, cell: 'off' }, numbers: 2 });
	});
});

it('reads a file in many pieces as in one, quotes and line ends across their borders', () => {
	const rows = Array.from(
		{ length: 40_000 },
		(_, i) => `"${(i * 0.02).toFixed(2)}","${i}","a remark, with a comma"`
	);
	const { table } = read(`time [s],count [-],note\r\n${rows.join('\r\n')}\r\n`);
	expect(table.rows).toBe(40_000);
	const counts = table.columns[1]!.values;
	expect(counts.every((value, i) => value === i)).toBe(true);
	expect(table.rowNumbers[39_999]).toBe(40_001);
	expect(table.longRows + table.shortRows).toBe(0);
});

it.each([
	['a header alone', 'time [s],speed [rpm],torque [Nm]\n', /no rows/],
	['prose', 'This is a letter.\nIt has no table.\nRegards\n', /No table/]
])('refuses %s', (_, text, sentence) => expect(refusal(text)).toMatch(sentence));
