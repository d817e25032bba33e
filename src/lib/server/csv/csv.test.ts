import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { csvResponse, unitHead, wantsCsv, type CsvCell } from './index';

async function* of(...pages: CsvCell[][][]) {
	yield* pages;
}

describe('a table as CSV', () => {
	it('comes back from a reader as it went in, with pages joined', async () => {
		const rows = [
			['run', 'title'],
			['A-R-0001', 'Head, "new"\r\nas cast'],
			['A-R-0002', '']
		];
		const response = await csvResponse('a b.csv', of(rows.slice(0, 2), rows.slice(2)));
		const text = await response.text();
		expect(text.endsWith('\r\n')).toBe(true);
		expect(Papa.parse(text, { skipEmptyLines: true }).data).toEqual(rows);
		expect(response.headers.get('content-disposition')).toBe('attachment; filename="a-b.csv"');
	});

	it('gives a spreadsheet no formula, and leaves numbers numbers', async () => {
		const row = ['=1+1', '@sum', '+1', '-x', '\tx', '=1\n2', -12.5, null];
		const [read] = Papa.parse<string[]>(await (await csvResponse('t.csv', of([row]))).text()).data;
		expect(read).toEqual(["'=1+1", "'@sum", "'+1", "'-x", "'\tx", "'=1\n2", '-12.5', '']);
	});

	it('tells the reader of pages when nobody listens any more', async () => {
		let ended = false;
		async function* endless() {
			try {
				for (;;) yield [['x']];
			} finally {
				ended = true;
			}
		}
		const response = await csvResponse('t.csv', endless());
		await response.body!.cancel();
		expect(ended).toBe(true);
	});

	it('is what Accept or the address asks for', () => {
		const asked = (accept: string) => new Request('http://lab.example', { headers: { accept } });
		expect(wantsCsv(asked('text/csv, */*;q=0.1'), undefined)).toBe(true);
		expect(wantsCsv(asked('application/json'), undefined)).toBe(false);
		expect(wantsCsv(asked('application/json'), 'csv')).toBe(true);
		expect(wantsCsv(asked('text/csv'), 'json')).toBe(false);
	});

	it('has the unit in the head', () =>
		expect([unitHead('peak_power', 'kW'), unitHead('bte_max', '-'), unitHead('u', 'rev/min')]).toEqual([
			'peak_power [kW]',
			'bte_max [1]',
			'u [rpm]'
		]));
});
