import { createHash } from 'node:crypto';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { signIn } from '../../src/lib/server/auth';
import { listBookings } from '../../src/lib/server/bookings';
import { listBuilds } from '../../src/lib/server/builds';
import { createClient } from '../../src/lib/server/clients';
import { readConfig } from '../../src/lib/server/config';
import { DEMO_PASSWORD, seedDemoLab } from '../../src/lib/server/demo';
import { DEMO_BOOKINGS } from '../../src/lib/server/demo/lab/bookings';
import { DEMO_PEOPLE } from '../../src/lib/server/demo/lab/people';
import { DEMO_RUNS } from '../../src/lib/server/demo/lab/runs';
import { castOf } from '../../src/lib/server/demo/people';
import { runFile } from '../../src/lib/server/demo/run-file';
import { closeDeps, openDeps, type Deps } from '../../src/lib/server/deps';
import { getRun, listRuns, runHistory, type RunDetail } from '../../src/lib/server/runs';
import { readTrend } from '../../src/lib/server/trends';
import { startWorker, type RunningWorker } from '../../src/lib/server/worker';
import { createDatabase, useDatabase, type TestDatabase } from '../setup/database';

const COUNTED = [
	'client',
	'public.person',
	'cell',
	'fuel',
	'fuel_batch',
	'limit_set',
	'limit_set_version',
	'engine',
	'build',
	'follow',
	'booking',
	'occupancy',
	'run',
	'log_line',
	'trace',
	'reduction',
	'audit'
];

async function counts(database: Pick<TestDatabase, 'url'>): Promise<Record<string, number>> {
	const client = new pg.Client({ connectionString: database.url('superuser') });
	await client.connect();
	try {
		const found: Record<string, number> = {};
		for (const table of COUNTED)
			found[table] = Number((await client.query(`select count(*) as n from ${table}`)).rows[0].n);
		return found;
	} finally {
		await client.end();
	}
}

describe('the demo lab', () => {
	const database = useDatabase();
	const lines: string[] = [];
	let deps: Deps;
	let worker: RunningWorker;
	let person: (key: string) => Principal;
	let sentAfterMs = Infinity;
	let runs: Map<string, RunDetail>;

	beforeAll(async () => {
		deps = openDeps(readConfig(database.env), 4);
		worker = await startWorker(deps);
		const began = performance.now();
		const ended = await seedDemoLab(deps, {
			say: (line) => {
				lines.push(line);
				if (line.includes(`${DEMO_RUNS.length} of`)) sentAfterMs = performance.now() - began;
			},
			patienceMs: 90_000
		});
		expect(ended, lines.join('\n')).toBe('complete');
		person = await castOf(deps);
		const all = (await listRuns(deps, person('manager'), { limit: 200 })).items;
		const whole = await Promise.all(all.map(({ number }) => getRun(deps, person('manager'), number)));
		runs = new Map(whole.map((run) => [run.traces[0]!.filename, run]));
	});
	afterAll(async () => {
		await worker.stop();
		await closeDeps(deps);
	});

	it('is sent soon, also with the worker in the same process, and says how far it is', () => {
		expect(sentAfterMs).toBeLessThan(60_000);
		expect(lines.filter((line) => / of \d+ traces sent$/.test(line))).toHaveLength(DEMO_RUNS.length);
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
			if (outcome.state !== 'closed') expect(run.reviewedBy).toBe(person(outcome.by).name);
		}
	);

	it('keeps each original as it was made', () => {
		for (const plan of DEMO_RUNS.slice(0, 3)) {
			const [trace] = runs.get(plan.filename)!.traces;
			expect(trace!.sha256).toBe(createHash('sha256').update(runFile(plan).bytes).digest('hex'));
		}
	});

	it('reviews nothing before its figures are there', async () => {
		const run = runs.get(DEMO_RUNS[0]!.filename)!;
		const actions = (await runHistory(deps, person('manager'), run.number)).map(({ action }) => action);
		expect(actions.indexOf('run.accept')).toBeGreaterThanOrEqual(0);
		expect(actions.indexOf('run.accept')).toBeLessThan(actions.indexOf('run.figures'));
	});

	it('flags the energy-flow run alone', () => {
		const flagged = [...runs.values()]
			.filter(({ flags }) => flags.length > 0)
			.map(({ traces }) => traces[0]!.filename);
		expect(flagged).toEqual(['ts-14-1-energy-flow.csv']);
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
			expect(own.items).toHaveLength(DEMO_RUNS.filter((run) => run.client === client).length);
			const builds = await listBuilds(deps, person(key), { limit: 200 });
			expect(builds.items.every((build) => build.client === client && build.following)).toBe(true);
		}
	});

	it('has slots that are done, slots ahead and requests that overlap', async () => {
		const { items } = await listBookings(deps, person('manager'), { limit: 200 });
		expect(items).toHaveLength(DEMO_BOOKINGS.length);
		const of = (state: string) => items.filter((one) => one.state === state);
		expect(of('done').length).toBeGreaterThanOrEqual(5);
		expect(of('confirmed').length).toBeGreaterThanOrEqual(2);
		const wishes = of('requested');
		const overlapping = wishes.filter((a) =>
			wishes.some((b) => a !== b && a.cell === b.cell && a.from < b.to && b.from < a.to)
		);
		expect(overlapping).toHaveLength(3);
	});

	it('lets a trend show that build B is a point better', async () => {
		const trend = await readTrend(deps, person('BVG'), {
			metric: 'bte_max',
			groupBy: 'build',
			engine: 'BV-16'
		});
		const mean = (build: string) => trend.groups.find(({ key }) => key.includes(build))!.mean;
		expect(100 * (mean('BV-16.B') - mean('BV-16.A'))).toBeGreaterThan(0.6);
	});

	it('adds nothing when it is started again', async () => {
		const before = await counts(database);
		expect(await seedDemoLab(deps)).toBe('already complete');
		expect(await counts(database)).toEqual(before);
	});
});

describe('a seed that was cut off', () => {
	const whole = useDatabase();
	let deps: Deps;

	beforeAll(() => {
		deps = openDeps(readConfig(whole.env), 4);
	});
	afterAll(() => closeDeps(deps));

	it('is taken up where it stopped, with no second of anything', async () => {
		class Killed extends Error {}
		const killAt = (text: string) => (line: string) => {
			if (line.includes(text)) throw new Killed();
		};
		for (const text of ['builds are in', '4 of', '9 of'])
			await expect(seedDemoLab(deps, { say: killAt(text), patienceMs: 0 })).rejects.toBeInstanceOf(Killed);
		// No worker runs here: everything is sent, and the reviews wait.
		expect(await seedDemoLab(deps, { patienceMs: 0 })).toBe('waiting');
		const once = await counts(whole);
		expect(await seedDemoLab(deps, { patienceMs: 0 })).toBe('waiting');
		expect(await counts(whole)).toEqual(once);
		expect(once).toMatchObject({
			client: 5,
			cell: 4,
			booking: DEMO_BOOKINGS.length,
			run: DEMO_RUNS.length,
			trace: DEMO_RUNS.length,
			log_line: DEMO_RUNS.flatMap(({ log }) => log).length,
			'public.person': DEMO_PEOPLE.length
		});
	});

	it('waits behind every user: its jobs have a later priority than an upload', async () => {
		const client = new pg.Client({ connectionString: whole.url('superuser') });
		await client.connect();
		const { rows } = await client.query(
			'select priority, count(*)::int as n from graphile_worker.jobs group by priority'
		);
		await client.end();
		expect(rows).toEqual([{ priority: 50, n: DEMO_RUNS.length }]);
	});

	it('does not run beside another one', async () => {
		const other = openDeps(readConfig(whole.env), 2);
		let beside: Promise<string> | undefined;
		await seedDemoLab(deps, {
			say: () => {
				beside ??= seedDemoLab(other);
			},
			patienceMs: 0
		});
		expect(await beside).toBe('busy');
		await closeDeps(other);
	});
});

describe('a laboratory of its own', () => {
	it('is left alone', async () => {
		const database = await createDatabase();
		const deps = openDeps(readConfig(database.env), 2);
		try {
			const nobody: Principal = {
				personId: null as never,
				name: 'Operator of the system',
				email: 'nobody@fellmoor.example',
				role: 'manager',
				clientId: null,
				units: 'si',
				via: { kind: 'session', id: 'test' }
			};
			await createClient(deps, nobody, { code: 'OWN', name: 'A client of its own' });
			const before = await counts(database);
			expect(await seedDemoLab(deps)).toBe('other lab');
			expect(await counts(database)).toEqual(before);
		} finally {
			await closeDeps(deps);
			await database.drop();
		}
	});
});
