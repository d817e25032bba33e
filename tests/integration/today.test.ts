import { sql } from 'kysely';
import { beforeEach, describe, expect, it } from 'vitest';
import { CHECKLIST } from '../../src/lib/domain/care/checklist';
import type { Principal } from '../../src/lib/server/access';
import { closeCell, confirmBooking, type Booking } from '../../src/lib/server/bookings';
import { changeBuild } from '../../src/lib/server/builds';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { answerCheck } from '../../src/lib/server/logbook';
import { closeRun, flagRun, NewFlag, NewRun, openRun } from '../../src/lib/server/runs';
import { readToday, type Today } from '../../src/lib/server/today';
import { hour, useBookingLab } from './booking-lab';

const lab = useBookingLab();
const MONDAY = 0;

const laneOf = (today: Today, cell: string) => today.cells.find(({ code }) => code === cell)!;
const codesOf = (needs: { code: string }[] = []) => needs.map(({ code }) => code);

let made = 0;
async function fuel(client?: string) {
	const manager = await lab.person('manager');
	const code = `F${++made}`;
	await createFuel(lab.deps, manager, NewFuel.parse({ code, name: 'Fuel' }));
	return createFuelBatch(
		lab.deps,
		manager,
		NewFuelBatch.parse({ fuel: code, code: `${code}-1`, ...(client ? { client } : {}) })
	);
}

/** A client's ready build in a cell of its own, and a batch of the lab's. */
async function scene(code: string, cellMore: object = {}) {
	const owner = await lab.client(code);
	const manager = await lab.person('manager');
	const build = await lab.build(code);
	await changeBuild(lab.deps, manager, build.id, { state: 'ready' }, null);
	return {
		owner,
		manager,
		build,
		cell: await lab.cell({ rigUpMinutes: 30, rigDownMinutes: 15, ...cellMore }),
		batch: await fuel(),
		client: await lab.person('client', owner.id),
		operator: await lab.person('operator')
	};
}
type Scene = Awaited<ReturnType<typeof scene>>;

async function slot(from: number, to: number, at: Scene, more: object = {}): Promise<Booking> {
	const asked = await lab.request(at.manager, at.cell.code, at.build.id, hour(from), hour(to), {
		fuelBatch: at.batch.id,
		kind: 'power_sweep',
		...more
	});
	return confirmBooking(lab.deps, at.manager, asked.id);
}

const open = (who: Principal, at: Scene, startedAt: Date, booking?: string) =>
	openRun(
		lab.deps,
		who,
		NewRun.parse({
			build: at.build.id,
			cell: at.cell.code,
			fuelBatch: at.batch.id,
			kind: 'power_sweep',
			startedAt: startedAt.toISOString(),
			booking
		})
	);

/** A trace of that state, put in as the worker leaves it. */
async function trace(run: { id: string }, state: 'ready' | 'needs_map', by: Principal) {
	await lab.deps.pools.lab.transaction().execute(async (trx) => {
		const { clientId } = await trx
			.selectFrom('run')
			.select('clientId')
			.where('id', '=', run.id)
			.executeTakeFirstOrThrow();
		await sql`insert into trace (client_id, run_id, filename, state, sha256, size_bytes, object_key, uploaded_by, error)
			values (${clientId}, ${run.id}, 'a.csv', ${state}, sha256('a'), 1, 'a', ${by.personId},
				${state === 'needs_map' ? 'Say which column is torque.' : null})`.execute(trx);
	});
}

beforeEach(() => lab.setNow(hour(MONDAY)));

describe('the board', () => {
	it('tells who is on, for how long, who is next, and nothing that is not lacking', async () => {
		const at = await scene('TDA');
		const first = await slot(1, 4, at);
		const second = await slot(6, 8, at);
		lab.setNow(hour(2));
		const run = await open(at.operator, at, hour(1), first.id);
		for (const { code: item } of CHECKLIST)
			await answerCheck(lab.deps, at.operator, run.id, { item, answer: 'done' });
		const lane = laneOf(await readToday(lab.deps, at.operator), at.cell.code);
		expect(lane.on).toMatchObject([
			{
				booking: { number: first.number },
				elapsedMinutes: 60,
				remainingMinutes: 120,
				lateMinutes: 0,
				overrunMinutes: 0,
				needs: []
			}
		]);
		expect(lane.next).toMatchObject({
			kind: 'booking',
			work: { booking: { number: second.number }, needs: [] }
		});
		expect(lane.entries.map(({ from }) => from)).toEqual([first.from, second.from]);
	});

	it('says each thing that a slot still lacks, and stops when it is there', async () => {
		const at = await scene('TDB', {
			fuels: [(await fuel()).fuel],
			absorber: { kind: 'ac', maxPowerKw: 20, maxTorqueNm: 500, maxSpeedRpm: 9000 }
		});
		const unready = await lab.build('TDB');
		const lacking = { ...at, build: unready };
		const booking = await slot(1, 3, lacking);
		const bare = await slot(5, 6, at, { fuelBatch: null });
		const early = laneOf(await readToday(lab.deps, at.manager), at.cell.code);
		expect(codesOf(early.next?.work?.needs)).toEqual(
			expect.arrayContaining(['fuel_not_plumbed', 'build_not_ready', expect.stringMatching(/^absorber_/)])
		);
		expect(codesOf(early.next?.work?.needs)).not.toContain('no_record');

		lab.setNow(hour(1));
		const begun = laneOf(await readToday(lab.deps, at.manager), at.cell.code);
		expect(codesOf(begun.on[0]?.needs)).toContain('no_record');
		expect(begun.next?.work?.booking?.number).toBe(bare.number);
		expect(codesOf(begun.next?.work?.needs)).toContain('fuel_not_chosen');

		const run = await open(at.operator, lacking, hour(1), booking.id);
		await changeBuild(lab.deps, at.manager, unready.id, { state: 'ready' }, null);
		const recorded = laneOf(await readToday(lab.deps, at.manager), at.cell.code);
		expect(codesOf(recorded.on[0]?.needs)).not.toContain('no_record');
		expect(codesOf(recorded.on[0]?.needs)).not.toContain('build_not_ready');
		expect(codesOf(recorded.on[0]?.needs)).not.toContain('no_trace');
		const checks = async () =>
			laneOf(await readToday(lab.deps, at.manager), at.cell.code).on[0]?.needs.filter(
				({ code }) => code === 'checklist_open'
			);
		const message = (open: number) => `Checklist of ${run.number}: ${open} items not answered`;
		expect(await checks()).toEqual([
			{ code: 'checklist_open', message: message(CHECKLIST.length), run: run.number }
		]);
		const [first, second] = CHECKLIST.map(({ code }) => code);
		await answerCheck(lab.deps, at.operator, run.id, { item: first!, answer: 'done' });
		await answerCheck(lab.deps, at.operator, run.id, { item: second!, answer: 'done' });
		await answerCheck(lab.deps, at.operator, run.id, { item: second!, answer: 'not_done' });
		expect(await checks()).toMatchObject([{ message: message(CHECKLIST.length - 1) }]);

		await closeRun(lab.deps, at.operator, run.id, null);
		const closed = laneOf(await readToday(lab.deps, at.manager), at.cell.code);
		expect(closed.on[0]?.needs.find(({ code }) => code === 'no_trace')).toEqual({
			code: 'no_trace',
			message: `Trace of ${run.number} not uploaded`,
			run: run.number
		});
		await trace(run, 'needs_map', at.operator);
		const unmapped = await readToday(lab.deps, at.manager);
		expect(codesOf(laneOf(unmapped, at.cell.code).on[0]?.needs)).toContain('needs_map');
		expect(codesOf(laneOf(unmapped, at.cell.code).on[0]?.needs)).not.toContain('no_trace');
		expect(unmapped.toMap.map(({ number }) => number)).toContain(run.number);

		lab.setNow(hour(4));
		const after = laneOf(await readToday(lab.deps, at.manager), at.cell.code);
		expect(after.on).toEqual([]);
		expect(after.earlier.map(({ needs }) => codesOf(needs))).toEqual([['needs_map']]);
	});

	it('says that a start is late and that a record overruns, and who waits', async () => {
		const at = await scene('TDC');
		const first = await slot(1, 3, at);
		const second = await slot(4, 5, at);
		lab.setNow(hour(2));
		const late = laneOf(await readToday(lab.deps, at.operator), at.cell.code).on[0]!;
		// Two hours from 08:00 and 15 min of rig-down, but the next takes the cell at 09:30.
		expect(late).toMatchObject({
			lateMinutes: 60,
			overrunMinutes: 0,
			affects: { kind: 'booking', number: second.number, client: 'TDC', waitsMinutes: 45 }
		});
		const run = await open(at.operator, at, hour(2));
		expect(laneOf(await readToday(lab.deps, at.operator), at.cell.code).on[0]).toMatchObject({
			lateMinutes: 0,
			runs: [{ number: run.number }]
		});
		lab.setNow(hour(3.5));
		expect(laneOf(await readToday(lab.deps, at.operator), at.cell.code).on[0]).toMatchObject({
			booking: { number: first.number },
			overrunMinutes: 30,
			remainingMinutes: -30,
			affects: { number: second.number, waitsMinutes: 15 }
		});
		await closeRun(lab.deps, at.operator, run.id, null);
		expect(laneOf(await readToday(lab.deps, at.operator), at.cell.code).on).toEqual([]);
	});

	it('shows runs without a slot, and tells records that nobody closed from those that run', async () => {
		const at = await scene('TDD');
		const old = await open(at.operator, at, hour(-30));
		const fresh = await open(at.operator, at, hour(0));
		lab.setNow(hour(0.5));
		const today = await readToday(lab.deps, at.operator);
		expect(laneOf(today, at.cell.code).on).toMatchObject([
			{ booking: null, runs: [{ number: fresh.number }], elapsedMinutes: 30, remainingMinutes: null }
		]);
		expect(today.leftOpen.map(({ number }) => number)).toContain(old.number);
		expect(today.leftOpen.map(({ number }) => number)).not.toContain(fresh.number);
	});

	it('lists what waits for a review, flagged apart, and counts all of it', async () => {
		const at = await scene('TDE');
		const plain = await open(at.operator, at, hour(-3));
		const flagged = await open(at.operator, at, hour(-2));
		await flagRun(
			lab.deps,
			at.operator,
			flagged.id,
			NewFlag.parse({ reason: 'Knock at 5 000 rev/min' }),
			null
		);
		for (const run of [plain, flagged]) await closeRun(lab.deps, at.operator, run.id, null);
		const today = await readToday(lab.deps, at.client);
		expect(today.flagged).toMatchObject({ count: 1, items: [{ number: flagged.number, flags: 1 }] });
		expect(today.toReview).toMatchObject({ count: 1, items: [{ number: plain.number }] });
	});

	it('shows staff requests and builds that are needed, and a closure as held', async () => {
		const at = await scene('TDF');
		const unready = await lab.build('TDF');
		const soon = await slot(30, 31, { ...at, build: unready });
		const asked = await lab.request(at.client, at.cell.code, at.build.number, hour(50), hour(51));
		await closeCell(lab.deps, at.manager, {
			cell: at.cell.code,
			from: hour(1),
			to: hour(2),
			title: 'Shaft change'
		});
		lab.setNow(hour(1.5));
		const today = await readToday(lab.deps, await lab.person('builder'));
		expect(today.requests.items.map(({ number }) => number)).toContain(asked.number);
		expect(today.buildsNeeded).toContainEqual(
			expect.objectContaining({ build: unready.number, booking: soon.number, cell: at.cell.code })
		);
		expect(laneOf(today, at.cell.code).held).toEqual({
			kind: 'closed',
			title: 'Shaft change',
			to: hour(2).toISOString()
		});
	});
});

describe('the board of a client', () => {
	it('shows own things, of a rival only that the cell is taken, and nothing else at all', async () => {
		const own = await scene('TDG');
		const rival = await scene('TDH');
		const rivals = { ...rival, cell: own.cell };
		const theirs = await slot(1, 3, rivals);
		const mine = await slot(5, 7, own);
		const later = await slot(9, 10, rivals);
		lab.setNow(hour(2));
		const theirRun = await open(own.operator, rivals, hour(1), theirs.id);
		await flagRun(lab.deps, own.operator, theirRun.id, NewFlag.parse({ reason: 'Rival knock' }), null);
		await trace(theirRun, 'needs_map', own.operator);
		await closeRun(lab.deps, own.operator, theirRun.id, null);
		const waiting = await lab.request(rival.client, own.cell.code, rival.build.number, hour(60), hour(61));

		const today = await readToday(lab.deps, own.client);
		const lane = laneOf(today, own.cell.code);
		expect(lane.on).toEqual([]);
		expect(lane.runs).toEqual([]);
		expect(lane.held).toMatchObject({ kind: 'taken', title: null });
		expect(lane.next).toMatchObject({ kind: 'booking', work: { booking: { number: mine.number } } });
		expect(today).toMatchObject({
			flagged: { count: 0, items: [] },
			toReview: { count: 0 },
			requests: { count: 0 },
			toMap: [],
			buildsNeeded: []
		});
		const told = JSON.stringify(today);
		for (const word of [theirs, later, waiting, theirRun].flatMap(({ id, number }) => [id, number]))
			expect(told).not.toContain(word);
		expect(told).not.toMatch(/TDH|Rival knock/);
		expect(told).not.toContain(rival.build.number);

		lab.setNow(hour(6));
		const late = laneOf(await readToday(lab.deps, own.client), own.cell.code);
		expect(late.on[0]).toMatchObject({
			booking: { number: mine.number },
			lateMinutes: 60,
			affects: { kind: 'taken', number: null, client: null }
		});
		expect(late.next).toMatchObject({ kind: 'taken', work: null });
	});

	it('says to each of the six roles what it may know', async () => {
		const at = await scene('TDI');
		const booking = await slot(1, 2, at);
		for (const role of ['admin', 'manager', 'engineer', 'builder', 'operator'] as const)
			expect(laneOf(await readToday(lab.deps, await lab.person(role)), at.cell.code).next).toMatchObject({
				work: { booking: { number: booking.number } }
			});
		const stranger = await lab.person('client', (await lab.client('TDJ')).id);
		expect(laneOf(await readToday(lab.deps, stranger), at.cell.code).next).toMatchObject({
			kind: 'taken',
			work: null
		});
	});
});
