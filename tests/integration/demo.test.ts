import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { z } from 'zod';
import { tQuantile } from '../../src/lib/domain/statistics/student-t';
import type { Principal } from '../../src/lib/server/access';
import { signIn } from '../../src/lib/server/auth';
import { listBookings } from '../../src/lib/server/bookings';
import { listBuilds } from '../../src/lib/server/builds';
import { readConfig } from '../../src/lib/server/config';
import { DEMO_PASSWORD, seedDemoLab } from '../../src/lib/server/demo';
import { labTime } from '../../src/lib/server/demo/calendar';
import { DEMO_BOOKINGS } from '../../src/lib/server/demo/lab/bookings';
import { DEMO_PEOPLE } from '../../src/lib/server/demo/lab/people';
import { DEMO_CLOSURES } from '../../src/lib/server/demo/lab/other-bookings';
import { DEMO_RECORDS, DEMO_RUNS } from '../../src/lib/server/demo/lab/runs';
import { castOf } from '../../src/lib/server/demo/people';
import { runFile } from '../../src/lib/server/demo/run-file';
import { closeDeps, openDeps, type Deps } from '../../src/lib/server/deps';
import { getFuelBatch } from '../../src/lib/server/fuels';
import { getRun, listLogLines, listRuns, runHistory, type RunDetail } from '../../src/lib/server/runs';
import { readSchedule } from '../../src/lib/server/schedule';
import { readTrend, TrendQuery } from '../../src/lib/server/trends';
import { startWorker, type RunningWorker } from '../../src/lib/server/worker';
import { useDatabase } from '../setup/database';
import { counts, rowsOf, sendAsUser, USERS_CLIENT, USERS_FILE } from './demo-lab';

describe('the demo lab', () => {
	const database = useDatabase();
	const lines: string[] = [];
	let deps: Deps;
	let worker: RunningWorker;
	let begun: Date;
	let person: (key: string) => Principal;
	let completeAfterMs = Infinity;
	let runs: Map<string, RunDetail>;
	const sending: Promise<{ readyAfterMs: number }>[] = [];

	beforeAll(async () => {
		deps = openDeps(readConfig(database.env), 4);
		worker = await startWorker(deps);
		begun = deps.now();
		const began = performance.now();
		const ended = await seedDemoLab(deps, {
			say: (line) => {
				lines.push(line);
				if (line.includes('18 of') || line.includes('36 of')) sending.push(sendAsUser(deps));
			},
			patienceMs: 90_000
		});
		completeAfterMs = performance.now() - began;
		expect(ended, lines.join('\n')).toBe('complete');
		await Promise.all(sending);
		person = await castOf(deps);
		const all = (await listRuns(deps, person('manager'), { limit: 500 })).items;
		const whole: RunDetail[] = [];
		for (const { number } of all) whole.push(await getRun(deps, person('manager'), number));
		runs = new Map(whole.map((run) => [run.traces[0]?.filename ?? run.number, run]));
		runs.delete(USERS_FILE);
	}, 180_000);
	afterAll(async () => {
		await worker.stop();
		await closeDeps(deps);
	});

	it('is sent soon, also with the worker in the same process, and says how far it is', () => {
		expect(completeAfterMs).toBeLessThan(90_000);
		expect(lines.filter((line) => / of \d+ traces sent$/.test(line))).toHaveLength(
			Math.ceil(DEMO_RUNS.length / 6)
		);
		expect(lines.at(-1)).toContain(DEMO_PASSWORD);
	});

	it.each(DEMO_RUNS)(
		'$filename ends as $trace, its run $outcome.state',
		({ filename, trace, outcome, client, loggedBy }) => {
			const run = runs.get(filename)!;
			expect(run.traces.map(({ state }) => state)).toEqual([trace]);
			expect(run.state).toBe(outcome.state);
			expect(run.client).toBe(client);
			expect(run.loggedBy).toBe(person(loggedBy).name);
			if ('by' in outcome) expect(run.reviewedBy).toBe(person(outcome.by).name);
		}
	);

	it('keeps each original as it was made', () => {
		for (const plan of DEMO_RUNS.slice(0, 3)) {
			const [trace] = runs.get(plan.filename)!.traces;
			expect(trace!.sha256).toBe(createHash('sha256').update(runFile(plan).bytes).digest('hex'));
		}
	});

	it('reviews nothing before its figures are there', async () => {
		const accepted = DEMO_RUNS.find(({ outcome }) => outcome.state === 'accepted')!;
		const run = runs.get(accepted.filename)!;
		const actions = (await runHistory(deps, person('manager'), run.number)).map(({ action }) => action);
		expect(actions.indexOf('run.accept')).toBeGreaterThanOrEqual(0);
		expect(actions.indexOf('run.accept')).toBeLessThan(actions.indexOf('run.figures'));
	});

	it('does not keep a user waiting who sends a trace in the midst of it', async () => {
		const uploads = await Promise.all(sending);
		expect(uploads).toHaveLength(2);
		for (const { readyAfterMs } of uploads) expect(readyAfterMs).toBeLessThan(10_000);
	});

	it('mails nobody about history', async () => {
		expect(await rowsOf(database, 'select subject from mail')).toEqual([]);
	});

	it('flags the runs that cross a limit, and those that somebody flagged, and no other', () => {
		const flagged = [...runs.values()].filter(({ flags }) => flags.some(({ raisedBy }) => !raisedBy));
		expect(flagged.map(({ traces }) => traces[0]!.filename).sort()).toEqual(
			DEMO_RUNS.filter(({ crosses }) => crosses > 0)
				.map(({ filename }) => filename)
				.sort()
		);
		const byHand = [...runs.values()].flatMap(({ flags }) => flags.filter(({ raisedBy }) => raisedBy));
		expect(byHand.map(({ message }) => message).sort()).toEqual(
			DEMO_RUNS.flatMap(({ flags }) => flags ?? [])
				.map(({ reason }) => reason)
				.sort()
		);
	});

	it('voids with a reason, and corrects log lines by superseding them', async () => {
		const voided = [...runs.values()].filter(({ state }) => state === 'voided');
		expect(voided.length).toBeGreaterThanOrEqual(3);
		for (const { reviewReason } of voided) expect(reviewReason!.length).toBeGreaterThan(20);
		const run = runs.get('bv-16-b-d84-1.csv')!;
		const log = await listLogLines(deps, person('engineer'), run.number);
		const correction = log.find(({ supersedes }) => supersedes)!;
		expect(correction.reason).toContain('Misread');
		expect(log.find(({ id }) => id === correction.supersedes)!.text).toContain('31 °C');
	});

	it('lets everybody sign in with the one password', async () => {
		for (const { email } of DEMO_PEOPLE) {
			const answer = await signIn(deps, {
				email,
				password: DEMO_PASSWORD,
				address: '127.0.0.1',
				userAgent: null
			});
			expect(answer, email).toBeTruthy();
		}
	});

	it('shows each client its own and no other', async () => {
		for (const { key, client } of DEMO_PEOPLE.filter((one) => one.client)) {
			const own = await listRuns(deps, person(key), { limit: 200 });
			const sentByUser = client === USERS_CLIENT ? sending.length : 0;
			const planned = [...DEMO_RUNS, ...DEMO_RECORDS].filter((run) => run.client === client);
			expect(own.items).toHaveLength(planned.length + sentByUser);
			const builds = await listBuilds(deps, person(key), { limit: 200 });
			expect(builds.items.every((build) => build.client === client && build.following)).toBe(true);
		}
	});

	it('has slots that are done, slots ahead and requests that overlap', async () => {
		const { items } = await listBookings(deps, person('manager'), { limit: 500 });
		const moves = DEMO_BOOKINGS.filter(({ fate }) => 'wished' in fate);
		expect(items).toHaveLength(DEMO_BOOKINGS.length + moves.length);
		expect(items.length).toBeGreaterThanOrEqual(95);
		const of = (state: string) => items.filter((one) => one.state === state);
		expect(of('done').length).toBeGreaterThanOrEqual(70);
		expect(of('confirmed').length).toBeGreaterThanOrEqual(6);
		expect(of('declined').length).toBe(DEMO_BOOKINGS.filter(({ fate }) => fate.is === 'declined').length);
		expect(of('cancelled').length).toBe(DEMO_BOOKINGS.filter(({ fate }) => fate.is === 'cancelled').length);
		expect(items.filter(({ moveRequest }) => moveRequest)).toHaveLength(moves.length);
		const wishes = of('requested');
		const overlapping = wishes.filter((a) =>
			wishes.some((b) => a !== b && a.cell === b.cell && a.from < b.to && b.from < a.to)
		);
		expect(overlapping).toHaveLength(3);
	});

	/** Difference of two groups of a trend, second less first, with its 95 % interval (Welch). */
	async function difference(query: z.input<typeof TrendQuery>, [first, second]: [string, string]) {
		const { groups } = await readTrend(deps, person('engineer'), TrendQuery.parse(query));
		const of = (name: string) => groups.find(({ key }) => key === name)!;
		const [a, b] = [of(first), of(second)];
		const [va, vb] = [a.sd! ** 2 / a.n, b.sd! ** 2 / b.n];
		const freedom = (va + vb) ** 2 / (va ** 2 / (a.n - 1) + vb ** 2 / (b.n - 1));
		const half = tQuantile(0.975, freedom) * Math.sqrt(va + vb);
		const by = b.mean - a.mean;
		return {
			n: [a.n, b.n],
			by,
			low: by - half,
			high: by + half,
			share: by / a.mean,
			halfShare: half / a.mean
		};
	}

	it('lets a trend show that build B is a point better than its parent', async () => {
		const query = { metric: 'bte_max', groupBy: 'build', engine: 'BV-16' } as const;
		const { by, low, high, n } = await difference(query, ['BV-16.A', 'BV-16.B']);
		expect(Math.min(...n)).toBeGreaterThanOrEqual(6);
		expect(100 * by).toBeGreaterThan(0.7);
		expect(100 * by).toBeLessThan(1.3);
		expect(low).toBeGreaterThan(0);
		expect(100 * (high - low)).toBeLessThan(0.8);
	});

	it('lets a trend show that cell 1 reads 1.5 % high, by one build run in two cells', async () => {
		for (const metric of ['peak_torque_corrected', 'bte_max']) {
			const query = { metric, groupBy: 'cell', build: 'QM-24.1' } as const;
			const { share, low, n } = await difference(query, ['AC3', 'EC1']);
			expect(Math.min(...n)).toBeGreaterThanOrEqual(6);
			expect(Math.abs(100 * share - 1.5), metric).toBeLessThan(0.4);
			expect(low).toBeGreaterThan(0);
		}
	});

	it('lets a trend show the batch that is out of specification', async () => {
		const query = { groupBy: 'batch', build: 'SD-45.1' } as const;
		const use = await difference({ ...query, metric: 'bsfc_min' }, ['B7-201', 'B7-219']);
		expect(use.low).toBeGreaterThan(0);
		// Light in energy by 3.4 %, and it burns worse than its energy alone explains.
		expect(100 * use.share).toBeGreaterThan(3.4);
		expect(100 * use.share).toBeLessThan(7);
		const efficiency = await difference({ ...query, metric: 'bte_max' }, ['B7-201', 'B7-219']);
		expect(efficiency.high).toBeLessThan(0);
		const { groups } = await readTrend(
			deps,
			person('engineer'),
			TrendQuery.parse({ ...query, metric: 'bsfc_min' })
		);
		expect(groups.toSorted((a, b) => b.mean - a.mean)[0]!.key).toBe('B7-219');
		const batch = await getFuelBatch(deps, person('engineer'), 'B7-219');
		expect(batch.properties['lhvMjKg']!.value).toBe(41.24);
	});

	it('is alive on its first day: a test on, one over its time, one late, one next that is not ready', async () => {
		const now = deps.now().getTime();
		const { items } = await listBookings(deps, person('manager'), { limit: 500 });
		const open = [...runs.values()].filter(({ state }) => state === 'open');
		const isRun = (number: string) => open.some(({ booking }) => booking === number);
		const slots = items.filter(({ state }) => state === 'confirmed' || state === 'done');
		const on = slots.filter(({ from, to }) => Date.parse(from) <= now && Date.parse(to) > now);
		expect(on.filter(({ number }) => isRun(number)).map(({ cell }) => cell)).toEqual(['EC1']);
		expect(on.filter(({ number }) => !isRun(number)).map(({ cell }) => cell)).toEqual(['AC3']);
		const over = slots.filter(({ to, number }) => Date.parse(to) <= now && isRun(number));
		expect(over.map(({ cell }) => cell)).toEqual(['WB2']);
		const next = slots.filter(({ from, cell }) => Date.parse(from) > now && cell === 'AC4').at(-1)!;
		const builds = await listBuilds(deps, person('manager'), { limit: 500 });
		expect(builds.items.find(({ number }) => number === next.build)!.state).toBe('in_preparation');
		expect(slots.filter(({ fuelBatch }) => fuelBatch === null)).toHaveLength(1);
	});

	it('keeps cells shut where they were', async () => {
		const closed = await Promise.all(
			DEMO_CLOSURES.map(async ({ cell, from }) => {
				const day = labTime(begun, deps.config.labTimeZone, from.workday, '08:00');
				const { cells } = await readSchedule(deps, person('manager'), {
					from: day.toISOString(),
					to: new Date(day.getTime() + 3_600_000).toISOString()
				});
				return cells.find(({ code }) => code === cell)!.entries.map(({ kind }) => kind);
			})
		);
		for (const kinds of closed) expect(kinds).toEqual(['closed']);
	});

	it('adds nothing when it is started again', async () => {
		const before = await counts(database);
		expect(await seedDemoLab(deps)).toBe('already complete');
		expect(await counts(database)).toEqual(before);
	});
});
