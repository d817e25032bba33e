import { sql } from 'kysely';
import { describe, expect, it } from 'vitest';
import { cancelBooking, confirmBooking, moveBooking, type Booking } from '../../src/lib/server/bookings';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { Problem } from '../../src/lib/server/problem';
import { hour, useBookingLab, ZONE } from './booking-lab';

const lab = useBookingLab();
const LIMIT_MS = 2000;
const STATEMENTS = 12;
/** The full count takes minutes, not the minute that a test may take otherwise. */
const LIMIT_OF_ROUNDS_MS = process.env.TRUNNION_LONG ? 40 * 60_000 : 60_000;

/** What 50 transactions of as many bare statements take here and now: on a machine that is busy with other things, not 0.1 s. */
async function bareMs(): Promise<number> {
	const began = performance.now();
	await Promise.all(
		Array.from({ length: 50 }, () =>
			lab.deps.pools.lab.transaction().execute(async (trx) => {
				for (let i = 0; i < STATEMENTS; i++) await sql`select count(*) from occupancy`.execute(trx);
			})
		)
	);
	return performance.now() - began;
}

/** Two seconds; more only where the machine itself is that slow. */
async function expectQuick(what: string, tookMs: number): Promise<void> {
	const bare = await bareMs();
	console.log(`${what}: ${tookMs.toFixed(0)} ms, ${(tookMs / bare).toFixed(1)} times the bare statements`);
	expect(tookMs).toBeLessThan(Math.max(LIMIT_MS, 8 * bare));
}

interface Race {
	won: Booking[];
	lost: Problem[];
	tookMs: number;
}

/** Lets all of them run at once; whatever is no clear refusal fails the test. */
async function race(work: (() => Promise<Booking>)[]): Promise<Race> {
	// Open connections first: otherwise the first of them has won before the others can speak.
	await Promise.all(Array.from({ length: 8 }, () => sql`select pg_sleep(0.05)`.execute(lab.deps.pools.lab)));
	const began = performance.now();
	const outcomes = await Promise.allSettled(work.map((one) => one()));
	const tookMs = performance.now() - began;
	const result: Race = { won: [], lost: [], tookMs };
	for (const outcome of outcomes) {
		if (outcome.status === 'fulfilled') result.won.push(outcome.value);
		else if (outcome.reason instanceof Problem) result.lost.push(outcome.reason);
		else throw outcome.reason;
	}
	return result;
}

/** Pairs that hold the same hour of a cell or of a build; rows without the constraint's own help. */
async function overlaps(): Promise<number> {
	const { rows } = await sql<{ n: number }>`
		select count(*) as n from occupancy a join occupancy b on a.id < b.id and a.during && b.during
			and (a.cell_id = b.cell_id or a.build_id = b.build_id)`.execute(lab.deps.pools.lab);
	return rows[0]!.n;
}

/** Confirmed bookings that hold no time, and time that is held for a booking that is not confirmed. */
async function adrift(): Promise<number> {
	const { rows } = await sql<{ n: number }>`
		select count(*) as n from booking b full join occupancy o on o.booking_id = b.id
		where (b.state = 'confirmed') is distinct from (o.id is not null)`.execute(lab.deps.pools.lab);
	return rows[0]!.n;
}

describe('simultaneous confirmations', () => {
	it('of 50 overlapping requests in one cell: one wins, 49 are told with what they clash', async () => {
		const manager = await lab.person('manager');
		const cell = await lab.cell({ rigUpMinutes: 30, rigDownMinutes: 30 });
		const asked: Booking[] = [];
		for (let i = 0; i < 5; i++) {
			const client = await lab.client(`SA${i}`);
			for (let j = 0; j < 10; j++) {
				const build = await lab.build(client.code);
				const from = hour(10 + j / 4);
				asked.push(
					await lab.request(manager, cell.code, build.number, from, hour(14), { client: client.code })
				);
			}
		}
		const { won, lost, tookMs } = await race(
			asked.map((booking) => () => confirmBooking(lab.deps, manager, booking.id))
		);
		expect(won).toHaveLength(1);
		expect(lost).toHaveLength(49);
		for (const problem of lost) {
			expect(problem.status).toBe(409);
			expect(problem.message).toContain(`${cell.code} is taken by ${won[0]!.number}`);
			expect(problem.extra.clashesWith).toMatchObject([{ number: won[0]!.number, cell: cell.code }]);
		}
		expect([await overlaps(), await adrift()]).toEqual([0, 0]);
		await expectQuick('50 confirmations of overlapping requests in one cell', tookMs);
	});

	it('of 50 requests of one build in two cells: one wins, 49 are told where it stands', async () => {
		const manager = await lab.person('manager');
		const client = await lab.client('SB');
		const build = await lab.build(client.code);
		const cells = [await lab.cell({ rigUpMinutes: 30 }), await lab.cell({ rigUpMinutes: 45 })];
		const asked: Booking[] = [];
		for (let i = 0; i < 50; i++)
			asked.push(await lab.request(manager, cells[i % 2]!.code, build.number, hour(10 + i / 20), hour(14)));
		const { won, lost, tookMs } = await race(
			asked.map((booking) => () => confirmBooking(lab.deps, manager, booking.id))
		);
		expect(won).toHaveLength(1);
		expect(lost.map((problem) => problem.status)).toEqual(Array(49).fill(409));
		for (const problem of lost) expect(problem.message).toContain(won[0]!.number);
		expect(
			lost.filter((problem) => problem.message.startsWith(`Build ${build.number} stands in`))
		).toHaveLength(25);
		expect([await overlaps(), await adrift()]).toEqual([0, 0]);
		await expectQuick('50 confirmations of one build in two cells', tookMs);
	});

	it('of the same request twenty times: it is confirmed once', async () => {
		const manager = await lab.person('manager');
		await lab.client('SC');
		const build = await lab.build('SC');
		const cell = await lab.cell();
		const { id } = await lab.request(manager, cell.code, build.number, hour(1), hour(2));
		const { won, lost } = await race(
			Array.from({ length: 20 }, () => () => confirmBooking(lab.deps, manager, id))
		);
		expect(won).toHaveLength(1);
		expect(new Set(lost.map((problem) => problem.message))).toEqual(
			new Set(['SC-B-0001 is confirmed already, so it cannot be confirmed.'])
		);
	});
});

describe('confirming, moving and cancelling at random', () => {
	it(
		'from two processes’ pools never overlaps, never ends in a fault, and always has a winner',
		async () => {
			const rounds = process.env.TRUNNION_LONG ? 500 : 12;
			const writers = process.env.TRUNNION_LONG ? 64 : 24;
			const other = openDeps(readConfig({ ...lab.database.env, LAB_TIME_ZONE: ZONE }));
			other.now = lab.deps.now;
			try {
				const manager = await lab.person('manager');
				const client = await lab.client('SD');
				const own = await lab.person('client', client.id);
				const cells = [await lab.cell({ rigUpMinutes: 15 }), await lab.cell(), await lab.cell()];
				const builds: string[] = [];
				for (let i = 0; i < 5; i++) builds.push((await lab.build('SD')).number);
				const random = seeded(20270301);
				const pick = <T>(list: readonly T[]) => list[Math.floor(random() * list.length)]!;
				const statuses = new Map<number, number>();
				const slots: Booking[] = [];
				for (let round = 0; round < rounds; round++) {
					// A day of its own for each round: on a full one nobody could win, and rightly so.
					const day = 24 * round + 8;
					const time = () => {
						const from = day + Math.floor(random() * 24) / 4;
						return { from: hour(from), to: hour(from + 0.5 + Math.floor(random() * 8) / 4) };
					};
					const fresh: Booking[] = [];
					for (let i = 0; i < writers / 2; i++) {
						const { from, to } = time();
						fresh.push(await lab.request(manager, pick(cells).code, pick(builds), from, to));
					}
					const { won, lost } = await race([
						...fresh.map((booking) => {
							const deps = pick([lab.deps, other]);
							return () => confirmBooking(deps, manager, booking.id);
						}),
						...Array.from({ length: slots.length ? writers / 2 : 0 }, () => {
							const [slot, deps, who, move] = [
								pick(slots),
								pick([lab.deps, other]),
								pick([manager, own]),
								time()
							];
							return random() < 0.3
								? () => cancelBooking(deps, who, slot.id)
								: () => moveBooking(deps, who, slot.id, { ...move, cell: pick(cells).code });
						})
					]);
					for (const problem of lost) statuses.set(problem.status, (statuses.get(problem.status) ?? 0) + 1);
					expect(won.length).toBeGreaterThan(0);
					expect([await overlaps(), await adrift()]).toEqual([0, 0]);
					slots.push(...won.filter((booking) => booking.state === 'confirmed').slice(0, 6));
				}
				console.log(
					`${rounds} rounds of ${writers} writers: refusals by status`,
					Object.fromEntries(statuses)
				);
				expect([...statuses.keys()]).toEqual([409]);
			} finally {
				await closeDeps(other);
			}
		},
		LIMIT_OF_ROUNDS_MS
	);
});

/** Numbers in [0, 1) that are the same in every run (a linear congruential generator). */
function seeded(seed: number): () => number {
	let state = seed >>> 0;
	return () => {
		state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
		return state / 2 ** 32;
	};
}
