import Papa from 'papaparse';
import { beforeAll, describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { flagRun, listRuns, NewRun, openRun, RunQuery, runsCsv } from '../../src/lib/server/runs';
import { putFigures } from '../figures-of';
import { refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();
let manager: Principal, client: Principal;
let [build, cell] = ['', ''];
/** Peak power of each run in the order in which they ran; the fourth has none. */
const POWERS = [120, 90, 150, null, -5];

beforeAll(async () => {
	manager = await lab.person('manager');
	const operator = await lab.person('operator');
	const ours = await lab.client('RA');
	await lab.client('RB');
	client = await lab.person('client', ours.id);
	cell = (await lab.cell()).code;
	build = (await lab.build('RA')).number;
	const theirs = (await lab.build('RB')).number;
	await createFuel(lab.deps, manager, NewFuel.parse({ code: 'F1', name: 'Petrol' }));
	await createFuelBatch(lab.deps, manager, NewFuelBatch.parse({ fuel: 'F1', code: 'F1-1' }));
	const open = (of: string, at: string, kind: string) =>
		openRun(lab.deps, operator, NewRun.parse({ build: of, cell, fuelBatch: 'F1-1', kind, startedAt: at }));
	for (const [n, power] of POWERS.entries()) {
		const { number } = await open(build, `2027-02-0${n + 1}T09:00:00Z`, n === 0 ? 'motoring' : 'power_sweep');
		if (power !== null)
			await putFigures(lab.database.url('superuser'), number, { peak_power: { value: power, unit: 'kW' } });
	}
	await flagRun(lab.deps, operator, 'RA-R-0002', { reason: 'Oil on the floor.', severity: 'review' }, null);
	await open(theirs, '2027-02-28T23:30:00Z', 'endurance');
}, 60_000);

const list = (asked: Record<string, string> = {}, who = manager) =>
	listRuns(lab.deps, who, { ...RunQuery.parse({ client: 'RA', ...asked }), limit: 50 });
const numbers = async (asked: Record<string, string> = {}, who = manager) =>
	(await list(asked, who)).items.map(({ number }) => number);
const of = (...ends: number[]) => ends.map((n) => `RA-R-000${n}`);

/** All numbers, two rows at a time. */
async function paged(sort: string): Promise<string[]> {
	const seen: string[] = [];
	let cursor: string | undefined;
	do {
		const page = await listRuns(lab.deps, manager, {
			...RunQuery.parse({ client: 'RA', sort }),
			limit: 2,
			cursor
		});
		seen.push(...page.items.map(({ number }) => number));
		cursor = page.nextCursor ?? undefined;
	} while (cursor);
	return seen;
}

describe('the run list', () => {
	it.each([
		['-started', of(5, 4, 3, 2, 1)],
		['started', of(1, 2, 3, 4, 5)],
		['number', of(1, 2, 3, 4, 5)],
		['-number', of(5, 4, 3, 2, 1)],
		// A run without the figure comes last both ways.
		['-peak_power', of(3, 1, 2, 5, 4)],
		['peak_power', of(5, 2, 1, 3, 4)]
	])('sorted by %s pages without a gap or a double', async (sort, expected) => {
		expect(await numbers({ sort })).toEqual(expected);
		expect(await paged(sort)).toEqual(expected);
	});

	it('filters by kind, flags, days, text and names', async () => {
		expect(await numbers({ kind: 'motoring' })).toEqual(of(1));
		expect(await numbers({ flagged: 'true' })).toEqual(of(2));
		expect(await numbers({ flagged: 'false' })).toEqual(of(5, 4, 3, 1));
		expect(await numbers({ from: '2027-02-02', to: '2027-02-03' })).toEqual(of(3, 2));
		expect(await numbers({ text: 'r-0004' })).toEqual(of(4));
		expect(await numbers({ text: 'delivered', cell, build, fuel: 'F1', batch: 'F1-1' })).toHaveLength(5);
		// What is typed is no pattern.
		expect(await numbers({ text: '%' })).toEqual([]);
	});

	it('gives the figures that are asked for', async () => {
		const [first] = (await list({ sort: '-peak_power', metrics: 'peak_power' })).items;
		expect(first!.metrics).toEqual({ peak_power: 150 });
		expect(
			(await list({ metrics: 'bte_max' })).items.every(({ metrics }) => Object.keys(metrics).length === 0)
		).toBe(true);
	});

	it('answers a name that there is not, or is another’s, with nothing and says so', async () => {
		expect(await list({ cell: 'C404' })).toEqual({
			items: [],
			nextCursor: null,
			notes: ['There is no cell C404.']
		});
		expect(await numbers({}, client)).toHaveLength(5);
		const foreign = await listRuns(lab.deps, client, { ...RunQuery.parse({ client: 'RB' }), limit: 50 });
		expect([foreign.items, foreign.notes]).toEqual([[], ['There is no client RB.']]);
		expect((await refusal(list({ from: 'soon' }))).fields.from).toContain('give a day like');
	});

	it('refuses a cursor of another order', async () => {
		const { nextCursor } = await listRuns(lab.deps, manager, { limit: 2, sort: 'number' });
		const other = listRuns(lab.deps, manager, { limit: 2, sort: '-peak_power', cursor: nextCursor! });
		expect((await refusal(other)).status).toBe(400);
	});

	it('comes as CSV, all of it and a client’s own only', async () => {
		const response = await runsCsv(
			lab.deps,
			client,
			RunQuery.parse({ sort: '-peak_power', metrics: 'peak_power' })
		);
		const { data, errors } = Papa.parse<Record<string, string>>(await response.text(), {
			header: true,
			skipEmptyLines: true
		});
		expect(errors).toEqual([]);
		expect(data.map((row) => [row.run, row['peak_power [kW]']])).toEqual([
			['RA-R-0003', '150'],
			['RA-R-0001', '120'],
			['RA-R-0002', '90'],
			['RA-R-0005', '-5'],
			['RA-R-0004', '']
		]);
	});
});
