import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { createClient } from '../../src/lib/server/clients';
import { readConfig } from '../../src/lib/server/config';
import { seedDemoLab } from '../../src/lib/server/demo';
import { DEMO_BOOKINGS } from '../../src/lib/server/demo/lab/bookings';
import { DEMO_PEOPLE } from '../../src/lib/server/demo/lab/people';
import { DEMO_RECORDS, DEMO_RUNS } from '../../src/lib/server/demo/lab/runs';
import { closeDeps, openDeps, type Deps } from '../../src/lib/server/deps';
import { startWorker } from '../../src/lib/server/worker';
import { createDatabase, useDatabase } from '../setup/database';
import { counts, rowsOf, sendAsUser } from './demo-lab';

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
		for (const text of ['builds are in', 'bookings is in', '12 of', '30 of'])
			await expect(seedDemoLab(deps, { say: killAt(text), patienceMs: 0 })).rejects.toBeInstanceOf(Killed);
		// No worker runs here: everything is sent, and the reviews wait.
		expect(await seedDemoLab(deps, { patienceMs: 0 })).toBe('waiting');
		const once = await counts(whole);
		expect(await seedDemoLab(deps, { patienceMs: 0 })).toBe('waiting');
		expect(await counts(whole)).toEqual(once);
		expect(once).toMatchObject({
			client: 5,
			cell: 4,
			booking: DEMO_BOOKINGS.length + 1,
			run: DEMO_RUNS.length + DEMO_RECORDS.length,
			trace: DEMO_RUNS.length,
			log_line: [...DEMO_RUNS, ...DEMO_RECORDS].flatMap(({ log }) => log).length,
			'public.person': DEMO_PEOPLE.length
		});
	});

	it('waits behind every user: a trace that is sent after all of its own is ready first', async () => {
		const waiting = () =>
			rowsOf<{ priority: number; n: number }>(
				whole,
				'select priority, count(*)::int as n from graphile_worker.jobs group by priority'
			);
		expect(await waiting()).toEqual([{ priority: 50, n: DEMO_RUNS.length }]);
		const sent = sendAsUser(deps);
		while ((await waiting()).length < 2) await sleep(20);
		const worker = await startWorker(deps);
		const { readyAfterMs } = await sent;
		const left = (await waiting()).find(({ priority }) => priority === 50)?.n ?? 0;
		await worker.stop();
		expect(readyAfterMs).toBeLessThan(10_000);
		expect(left).toBeGreaterThan(DEMO_RUNS.length - 10);
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
