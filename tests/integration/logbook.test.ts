import { readFileSync } from 'node:fs';
import { sql } from 'kysely';
import { describe, expect, it } from 'vitest';
import { CHECKLIST } from '../../src/lib/domain/care/checklist';
import { createFuel, createFuelBatch } from '../../src/lib/server/fuels';
import { addReading, answerCheck, getChecklist, listReadings } from '../../src/lib/server/logbook';
import { acceptRun, changeRun, getRun, NewRun, openRun, runHistory } from '../../src/lib/server/runs';
import { placeTrace, processTrace, readEarlier, receiveTrace } from '../../src/lib/server/traces';
import { readTrend, TrendQuery } from '../../src/lib/server/trends';
import { hour, refusal, useBookingLab } from './booking-lab';

/** A record beside its trace: checklist, readings of the air, what is declared, and which trace the figures are of. */
const lab = useBookingLab();
const SWEEP = readFileSync(new URL('../traces/sweep-plain.csv', import.meta.url));

let made = 0;
async function scene() {
	const n = ++made;
	const [own, rival] = [await lab.client(`L${n}`), await lab.client(`M${n}`)];
	const [cell, build] = [await lab.cell(), await lab.build(own.code)];
	const manager = await lab.person('manager');
	await createFuel(lab.deps, manager, { code: `F${n}`, name: 'Fuel' });
	await createFuelBatch(lab.deps, manager, { fuel: `F${n}`, code: `Q${n}`, lhvMjKg: { value: 42.7 } });
	const operator = await lab.person('operator');
	const open = (at: number) =>
		openRun(
			lab.deps,
			operator,
			NewRun.parse({
				client: own.code,
				build: build.id,
				cell: cell.code,
				fuelBatch: `Q${n}`,
				kind: 'power_sweep',
				correction: 'iso_1585',
				startedAt: hour(at).toISOString(),
				ambient: { barometerKpa: 98.2, temperatureC: 27, humidityPct: 48 }
			})
		);
	return {
		own,
		open,
		run: await open(1),
		operator,
		engineer: await lab.person('engineer'),
		client: await lab.person('client', own.id),
		rival: await lab.person('client', rival.id)
	};
}

async function send(who: Parameters<typeof receiveTrace>[1], run: string, filename: string, bytes: Buffer) {
	const { Readable } = await import('node:stream');
	const { id } = await receiveTrace(lab.deps, who, run, {
		filename,
		body: Readable.from([bytes]),
		declaredBytes: null
	});
	await processTrace(lab.deps, { clientId: '', traceId: id });
	return id;
}

/** The sweep with its torque scaled, so that its figures tell it from the plain one. */
function scaled(factor: number): Buffer {
	const [head, ...rows] = SWEEP.toString('utf8').split('\n');
	const at = head!.split(',').findIndex((name) => /torque/i.test(name));
	return Buffer.from(
		[
			head,
			...rows.map((row) => {
				const cells = row.split(',');
				if (cells[at]?.trim() && Number.isFinite(Number(cells[at])))
					cells[at] = String(Number(cells[at]) * factor);
				return cells.join(',');
			})
		].join('\n')
	);
}

describe('the pre-run checklist', () => {
	it('is not asked for when a record opens, and stands as still needed until it is answered', async () => {
		const { run, operator } = await scene();
		expect(run.stillNeeded).toContain(`${CHECKLIST.length} items of the pre-run checklist`);
		for (const { code } of CHECKLIST)
			await answerCheck(lab.deps, operator, run.id, { item: code, answer: 'done' });
		expect((await getRun(lab.deps, operator, run.id)).stillNeeded).toEqual([
			'Net or gross: corrected power is compared as one of the two',
			'A trace'
		]);
	});

	it('keeps every answer with who and when; the newest holds', async () => {
		const { run, operator, engineer, client, rival } = await scene();
		await answerCheck(lab.deps, operator, run.id, { item: 'guards', answer: 'done' });
		await answerCheck(lab.deps, engineer, run.id, { item: 'guards', answer: 'not_done', reason: 'Loose.' });
		const seen = (await getChecklist(lab.deps, client, run.id)).items.find(({ item }) => item === 'guards');
		expect(seen).toMatchObject({
			holds: { answer: 'not_done', reason: 'Loose.', by: engineer.name },
			before: [{ answer: 'done', by: operator.name }]
		});
		expect((await refusal(getChecklist(lab.deps, rival, run.id))).status).toBe(404);
		expect((await runHistory(lab.deps, operator, run.id)).slice(0, 2)).toMatchObject([
			{ action: 'checklist.not_done', detail: 'Guards and shaft cover are closed and fixed (Loose.)' },
			{ action: 'checklist.done' }
		]);
	});

	it('can only be appended to, even by the lab’s own login, and not at all by a client’s', async () => {
		const { run, operator } = await scene();
		await answerCheck(lab.deps, operator, run.id, { item: 'fuel', answer: 'done' });
		await addReading(lab.deps, operator, run.id, { barometerKpa: 98.1 });
		const { lab: staff, client } = lab.deps.pools;
		for (const table of ['checklist_entry', 'air_reading'])
			for (const [db, change] of [
				[staff, sql`update ${sql.table(table)} set author = author`],
				[staff, sql`delete from ${sql.table(table)}`],
				[client, sql`insert into ${sql.table(table)} default values`],
				[client, sql`delete from ${sql.table(table)}`]
			] as const)
				await expect(change.execute(db), table).rejects.toThrow('permission denied');
	});

	it('knows its items, by name', async () => {
		const { run, operator } = await scene();
		const problem = await refusal(answerCheck(lab.deps, operator, run.id, { item: 'luck', answer: 'done' }));
		expect(problem.fields).toEqual({ item: 'there is no such item on the checklist.' });
	});
});

describe('readings of the air', () => {
	it('stand with their clock; a correction keeps the moment of what it corrects, once', async () => {
		const { run, operator, client, rival } = await scene();
		const first = await addReading(lab.deps, operator, run.id, { barometerKpa: 89.1, at: hour(2) });
		await addReading(lab.deps, operator, run.id, { temperatureC: 29.5, humidityPct: 41, at: hour(3) });
		const correct = () =>
			addReading(lab.deps, operator, run.id, {
				barometerKpa: 98.1,
				supersedes: first.id,
				reason: 'Digits swapped.'
			});
		await correct();
		expect(await listReadings(lab.deps, client, run.id)).toMatchObject([
			{ at: hour(2), barometerKpa: 89.1, supersedes: null },
			{ at: hour(2), barometerKpa: 98.1, supersedes: first.id, reason: 'Digits swapped.' },
			{ at: hour(3), barometerKpa: null, temperatureC: 29.5, humidityPct: 41 }
		]);
		await expect(correct()).rejects.toThrow();
		expect((await refusal(listReadings(lab.deps, rival, run.id))).status).toBe(404);
		expect((await refusal(addReading(lab.deps, operator, run.id, {}))).fields).toEqual({
			barometerKpa: 'give at least one reading.'
		});
	});
});

describe('what is declared', () => {
	it('changes on the version it was read at, is told in the history, and stays once the run is accepted', async () => {
		const { run, operator, engineer } = await scene();
		const changed = await changeRun(
			lab.deps,
			operator,
			run.id,
			{ net: true, auxiliaries: ['fan', 'alternator'], exhaustBackPressureKpa: 6.5 },
			run.version
		);
		expect(changed).toMatchObject({
			net: true,
			auxiliaries: ['fan', 'alternator'],
			inletDepressionKpa: null,
			exhaustBackPressureKpa: 6.5,
			version: run.version + 1
		});
		const late = await refusal(changeRun(lab.deps, engineer, run.id, { net: false }, run.version));
		expect(late.status).toBe(412);
		const same = await changeRun(lab.deps, operator, run.id, { net: true }, changed.version);
		expect(same.version).toBe(changed.version);
		expect((await runHistory(lab.deps, operator, run.id))[0]).toMatchObject({
			action: 'run.declare',
			detail: 'net or gross, auxiliaries, exhaust back-pressure'
		});
		await acceptRun(lab.deps, engineer, run.id, undefined, null);
		const after = await refusal(changeRun(lab.deps, operator, run.id, { net: false }, null));
		expect(after.status).toBe(409);
	});

	it('makes the figures again where they depend on it', async () => {
		const { run, operator } = await scene();
		const trace = await send(operator, run.id, 'sweep.csv', SWEEP);
		const before = await getRun(lab.deps, operator, run.id);
		await changeRun(lab.deps, operator, run.id, { ambient: { barometerKpa: 95 } }, before.version);
		expect((await getRun(lab.deps, operator, run.id)).traces[0]!.state).toBe('received');
		await processTrace(lab.deps, { clientId: '', traceId: trace });
		const again = await getRun(lab.deps, operator, run.id);
		expect(again.traces[0]!.state).toBe('ready');
		expect(again.metrics.peak_power!.value).toBeCloseTo(before.metrics.peak_power!.value, 9);
	});
});

describe('the primary trace', () => {
	it('gives the run its figures, and so do lists and trends, whichever is chosen', async () => {
		const { run, operator, client, own } = await scene();
		const first = await send(operator, run.id, 'a.csv', SWEEP);
		const second = await send(operator, run.id, 'b.csv', scaled(1.1));
		const peak = async () => (await getRun(lab.deps, client, run.id)).metrics.peak_torque!.value;
		const trend = async () => {
			const query = TrendQuery.parse({ metric: 'peak_torque', client: own.code });
			return JSON.stringify(await readTrend(lab.deps, client, query));
		};
		const [before, trendBefore] = [await peak(), await trend()];
		await placeTrace(lab.deps, operator, run.id, second, { primary: true });
		expect((await peak()) / before).toBeCloseTo(1.1, 3);
		expect(await trend()).not.toBe(trendBefore);
		const current = async () =>
			(
				await sql<{ of: string }>`
					select distinct d.trace_id as of from metric m join reduction d on d.id = m.reduction_id
					where m.run_id = ${run.id} and m.is_current`.execute(lab.deps.pools.lab)
			).rows.map(({ of }) => of);
		expect(await current()).toEqual([second]);
		// Figures made anew for the one that stands back stay back.
		await processTrace(lab.deps, { clientId: '', traceId: first });
		expect(await current()).toEqual([second]);
		await placeTrace(lab.deps, operator, run.id, first, { primary: true });
		expect(await peak()).toBeCloseTo(before, 9);
		expect(await trend()).toBe(trendBefore);
	});

	it('is chosen by two at once without two of them', async () => {
		const { run, operator, engineer } = await scene();
		const traces = [
			await send(operator, run.id, 'a.csv', SWEEP),
			await send(operator, run.id, 'b.csv', scaled(1.1))
		];
		await Promise.all(
			[0, 1, 0, 1, 0, 1].map((n) =>
				Promise.all([
					placeTrace(lab.deps, n ? engineer : operator, run.id, traces[n]!, { primary: true }),
					processTrace(lab.deps, { clientId: '', traceId: traces[n]! })
				])
			)
		);
		const after = await getRun(lab.deps, operator, run.id);
		const primary = after.traces.filter((trace) => trace.primary);
		expect(primary).toHaveLength(1);
		const { rows } = await sql<{ of: string }>`
			select distinct d.trace_id as of from metric m join reduction d on d.id = m.reduction_id
			where m.run_id = ${run.id} and m.is_current`.execute(lab.deps.pools.lab);
		expect(rows.map(({ of }) => of)).toEqual([primary[0]!.id]);
	});

	it('is one with figures; a clock can be set; and both are told in the history', async () => {
		const { run, operator } = await scene();
		await send(operator, run.id, 'a.csv', SWEEP);
		const broken = await send(operator, run.id, 'b.csv', Buffer.from('not a table'));
		const problem = await refusal(placeTrace(lab.deps, operator, run.id, broken, { primary: true }));
		expect(problem.message).toContain('it has no figures');
		await placeTrace(lab.deps, operator, run.id, broken, { timeOffsetS: 12.5 });
		expect((await getRun(lab.deps, operator, run.id)).traces[1]).toMatchObject({ timeOffsetS: 12.5 });
		expect((await runHistory(lab.deps, operator, run.id))[0]).toMatchObject({
			action: 'trace.offset',
			detail: 'b.csv: 12.5 s after the run’s start'
		});
	});
});

describe('earlier runs of the build', () => {
	it('offer their curves, the latest two at first, and none of a later run or another’s', async () => {
		const { run, open, operator, client, rival } = await scene();
		const runs = [run, await open(2), await open(3), await open(4)];
		for (const { id } of runs) await send(operator, id, 'sweep.csv', SWEEP);
		const seen = async (query: { runs?: string[] }) =>
			(await readEarlier(lab.deps, client, runs[3]!.id, query)).runs.map(
				({ number, curve }) => `${number.slice(-1)}${curve ? ' shown' : ''}`
			);
		expect(await seen({})).toEqual(['3 shown', '2 shown', '1']);
		expect(await seen({ runs: [run.number] })).toEqual(['3', '2', '1 shown']);
		expect(await seen({ runs: [] })).toEqual(['3', '2', '1']);
		expect((await readEarlier(lab.deps, client, run.id, {})).runs).toEqual([]);
		expect((await refusal(readEarlier(lab.deps, rival, run.id, {}))).status).toBe(404);
	});
});
