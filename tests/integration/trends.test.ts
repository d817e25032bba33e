import Papa from 'papaparse';
import { beforeAll, describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { acceptRun, closeRun, NewRun, openRun, voidRun } from '../../src/lib/server/runs';
import { listMetricCodes, readTrend, trendCsv, TrendQuery } from '../../src/lib/server/trends';
import { putFigures } from '../figures-of';
import { refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();
let manager: Principal, client: Principal, rival: Principal;
let [a, b, theirs] = ['', '', ''];
const cells: string[] = [];

interface Made {
	build: string;
	cell?: number;
	batch?: string;
	at: string;
	power: number;
	outsideRange?: string;
	owner?: string;
}

/** A closed run with one figure, its peak power. */
async function run({ build, cell = 0, batch = 'F1-1', at, power, outsideRange, owner = 'TA' }: Made) {
	const operator = await lab.person('operator');
	const { number } = await openRun(
		lab.deps,
		operator,
		NewRun.parse({
			client: owner,
			build,
			cell: cells[cell],
			fuelBatch: batch,
			kind: 'power_sweep',
			startedAt: at
		})
	);
	await putFigures(lab.database.url('superuser'), number, {
		peak_power: { value: power, unit: 'kW', u: 0.4, ...(outsideRange ? { outsideRange } : {}) }
	});
	await closeRun(lab.deps, operator, number, null);
	return number;
}

const ask = (question: Record<string, string> = {}, who = manager) =>
	readTrend(lab.deps, who, TrendQuery.parse({ metric: 'peak_power', client: 'TA', ...question }));
const keysOf = async (question: Record<string, string>) => (await ask(question)).groups.map(({ key }) => key);
const ofA = async (question: Record<string, string>) =>
	(await ask({ build: a, ...question })).points.map(({ value }) => value).sort();

let accepted = '';

beforeAll(async () => {
	manager = await lab.person('manager');
	const ours = await lab.client('TA');
	const other = await lab.client('TB');
	client = await lab.person('client', ours.id);
	rival = await lab.person('client', other.id);
	cells.push((await lab.cell()).code, (await lab.cell()).code);
	a = (await lab.build('TA')).number;
	b = (await lab.build('TA')).number;
	theirs = (await lab.build('TB')).number;
	await createFuel(lab.deps, manager, NewFuel.parse({ code: 'F1', name: 'Petrol' }));
	for (const code of ['F1-1', 'F1-2'])
		await createFuelBatch(lab.deps, manager, NewFuelBatch.parse({ fuel: 'F1', code }));

	// Three of A on three days, the middle one over the edge of a month by the lab's clock only; two of B on one day.
	await run({ build: a, at: '2027-02-10T09:00:00Z', power: 100 });
	await run({ build: a, at: '2027-02-28T23:30:00Z', power: 102 });
	accepted = await run({ build: a, at: '2027-03-31T21:30:00Z', power: 104, cell: 1 });
	await run({ build: b, at: '2027-03-10T09:00:00Z', power: 110, batch: 'F1-2' });
	await run({ build: b, at: '2027-03-10T10:00:00Z', power: 112, batch: 'F1-2' });
	// None of these counts.
	await run({ build: b, at: '2027-03-11T10:00:00Z', power: 500, outsideRange: 'too fast' });
	const bad = await run({ build: b, at: '2027-03-12T10:00:00Z', power: 900 });
	await voidRun(lab.deps, manager, bad, 'Wrong fuel.', null);
	await acceptRun(lab.deps, manager, accepted, undefined, null);
	await run({ build: theirs, at: '2027-03-10T09:00:00Z', power: 1, owner: 'TB' });
}, 60_000);

describe('a trend', () => {
	it('has n, mean, standard deviation, the interval of the mean and Welch’s difference', async () => {
		const { groups, against, unit, pointsTotal } = await ask();
		expect([against, unit, pointsTotal]).toEqual([a, 'kW', 5]);
		expect(
			groups.map(({ key, n, runs, mean, difference }) => [key, n, runs, mean, difference === null])
		).toEqual([
			[a, 3, 3, 102, true],
			[b, 2, 2, 111, false]
		]);
		expect(groups[0]!.sd).toBeCloseTo(2, 10);
		// t(0.975, 2) = 4.302653
		expect(groups[0]!.ci95![1]).toBeCloseTo(102 + (4.302653 * 2) / Math.sqrt(3), 5);
		expect(groups[1]!.sd).toBeCloseTo(Math.SQRT2, 10);
		// 4/3 and 1: standard error √(7/3), (7/3)² / ((4/3)²/2 + 1) degrees of freedom.
		expect(groups[1]!.difference!.value).toBeCloseTo(9, 10);
		expect(groups[1]!.difference!.df).toBeCloseTo(2.882353, 6);
		expect(groups[1]!.difference!.ci95[0]).toBeCloseTo(4.024532, 5);
	});

	it('compares with the group that is named, and says when there is none of that name', async () => {
		const turned = await ask({ against: b });
		expect(turned.groups[0]!.difference!.value).toBeCloseTo(-9, 10);
		expect(turned.groups[1]!.difference).toBeNull();
		const nobody = await ask({ against: 'B404' });
		expect(nobody.against).toBeNull();
		expect(nobody.notes).toEqual(['No group here is called B404, so nothing is compared.']);
	});

	it('counts a set of repeats once when asked to: two runs of one afternoon are one', async () => {
		const { groups, pointsTotal } = await ask({ repeats: 'once' });
		expect(groups.map(({ n, runs, sets, mean, sd }) => [n, runs, sets, mean, sd])).toEqual([
			[3, 3, 3, 102, 2],
			[1, 2, 1, 111, null]
		]);
		expect(groups[1]!.ci95).toBeNull();
		expect(groups[1]!.difference).toBeNull();
		expect(pointsTotal).toBe(5);
	});

	it('has months and days of the lab’s clock', async () => {
		// 23:30 UTC on 28 February is March in Stockholm; 21:30 UTC on 31 March, in summer time, is not yet April.
		const { groups } = await ask({ groupBy: 'month', build: a });
		expect(groups.map(({ key, n }) => [key, n])).toEqual([
			['2027-02', 1],
			['2027-03', 2]
		]);
		expect(await ofA({ from: '2027-03-01' })).toEqual([102, 104]);
		expect(await ofA({ to: '2027-02-28' })).toEqual([100]);
		expect(await ofA({ from: '2027-03-31', to: '2027-03-31' })).toEqual([104]);
		expect(await ofA({ from: '2027-02-28T23:30:00Z', to: '2027-02-28T23:31:00Z' })).toEqual([102]);
		expect((await refusal(ask({ from: 'spring' }))).fields.from).toContain('give a day like');
	});

	it('groups by cell, fuel, batch and engine, and filters by each', async () => {
		expect(await keysOf({ groupBy: 'cell' })).toEqual(cells);
		expect(await keysOf({ groupBy: 'fuel' })).toEqual(['F1']);
		expect(await keysOf({ groupBy: 'batch' })).toEqual(['F1-1', 'F1-2']);
		expect((await ask({ groupBy: 'engine' })).groups).toHaveLength(2);
		expect(await keysOf({ cell: cells[1]! })).toEqual([a]);
		expect(await keysOf({ batch: 'F1-2' })).toEqual([b]);
		expect(await keysOf({ kind: 'endurance' })).toEqual([]);
		expect((await ask({ state: 'accepted' })).points.map(({ run: number }) => number)).toEqual([accepted]);
		expect((await ask({ runs: `${accepted},TA-R-0001` })).pointsTotal).toBe(2);
	});

	it('answers a filter that names nothing with nothing, and says so', async () => {
		const empty = await ask({ engine: 'E404', cell: 'C404' });
		expect([empty.groups, empty.points, empty.pointsTotal]).toEqual([[], [], 0]);
		expect(empty.notes).toEqual(['There is no engine E404.', 'There is no cell C404.']);
		expect((await ask({ metric: 'mood' })).groups).toEqual([]);
	});

	it('shows a client nothing of another: an absent build and a foreign one are alike', async () => {
		const question = (build: string) =>
			readTrend(lab.deps, client, TrendQuery.parse({ metric: 'peak_power', build }));
		const foreign = await question(theirs);
		expect(foreign.groups).toEqual([]);
		expect(foreign.notes).toEqual([`There is no build ${theirs}.`]);
		expect((await question('B404')).notes).toEqual(['There is no build B404.']);
		const own = await readTrend(lab.deps, client, TrendQuery.parse({ metric: 'peak_power' }));
		expect(own.points).toHaveLength(5);
		const others = await readTrend(
			lab.deps,
			rival,
			TrendQuery.parse({ metric: 'peak_power', groupBy: 'cell' })
		);
		expect(others.points.map(({ value }) => value)).toEqual([1]);
		expect(await listMetricCodes(lab.deps, rival)).toEqual(['peak_power']);
	});
});

describe('a trend as CSV', () => {
	const table = async (which: 'points' | 'groups', who = manager, question = {}) => {
		const query = TrendQuery.parse({ metric: 'peak_power', ...question });
		const response = await trendCsv(lab.deps, who, query, which);
		return Papa.parse<Record<string, string>>(await response.text(), { header: true, skipEmptyLines: true });
	};

	it('has every run behind it, with its unit', async () => {
		const { data, errors } = await table('points', client);
		expect(errors).toEqual([]);
		expect(data).toHaveLength(5);
		expect(data[0]).toMatchObject({
			run: accepted,
			client: 'TA',
			build: a,
			fuel: 'F1',
			batch: 'F1-1',
			cell: cells[1],
			kind: 'power_sweep',
			state: 'accepted',
			group: a,
			'peak_power [kW]': '104',
			'u [kW]': '0.4'
		});
		expect(Date.parse(data[0]!.started_at!)).toBe(Date.parse('2027-03-31T21:30:00Z'));
	});

	it('has the groups with their difference', async () => {
		const { data, errors } = await table('groups', client);
		expect(errors).toEqual([]);
		expect(data.map((row) => [row.build, row.n, row['mean [kW]'], row.compared_with])).toEqual([
			[a, '3', '102', ''],
			[b, '2', '111', a]
		]);
		expect(Number(data[1]!['difference [kW]'])).toBeCloseTo(9, 10);
	});

	it('is a client’s own only', async () => {
		expect((await table('points', rival)).data.map((row) => row.client)).toEqual(['TB']);
		expect((await table('points', client, { build: theirs })).data).toEqual([]);
	});
});
