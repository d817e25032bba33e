import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { afterAll, describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import {
	addPerson,
	createTokenFor,
	endSession,
	principalOfSession,
	principalOfToken,
	revokeToken,
	signIn
} from '../../src/lib/server/auth';
import {
	cancelBooking,
	closeCell,
	confirmBooking,
	moveBooking,
	removeClosure
} from '../../src/lib/server/bookings';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { closeEvents, scheduleEvents } from '../../src/lib/server/events';
import { useStack } from '../setup/stack';
import { hour, refusal, useBookingLab } from './booking-lab';

const PASSWORD = 'a sentence nobody guesses';
const SOON_MS = 5_000;
/** Long enough for a word that is not to come. */
const QUIET_MS = 400;

/** Reads a stream as it comes. */
function ear(response: Response) {
	const reader = response.body!.getReader();
	let heard = '';
	let hasEnded = false;
	const done = (async () => {
		for (;;) {
			const { value, done: end } = await reader.read();
			if (end) break;
			heard += new TextDecoder().decode(value);
		}
	})()
		.catch(() => undefined)
		.finally(() => (hasEnded = true));
	const words = () => heard.match(/event: changed/g)?.length ?? 0;
	return {
		words,
		/** Whether something was said since the last question; waits for it, or makes sure of the silence. */
		async hears(expected: boolean): Promise<boolean> {
			const until = Date.now() + (expected ? SOON_MS : QUIET_MS);
			while (Date.now() < until && (!expected || words() === 0)) await sleep(20);
			const said = words() > 0;
			heard = '';
			return said;
		},
		get hasEnded() {
			return hasEnded;
		},
		done,
		close: () => reader.cancel()
	};
}

/** How long it took, or fails when it did not within five seconds. */
async function endsSoon(one: ReturnType<typeof ear>): Promise<number> {
	const start = performance.now();
	await Promise.race([one.done, sleep(SOON_MS)]);
	expect(one.hasEnded).toBe(true);
	return performance.now() - start;
}

describe('the stream of changes', () => {
	const lab = useBookingLab();
	afterAll(() => closeEvents(lab.deps));

	/** People who came in by a token, as the stream asks again whether it holds. */
	async function withToken(who: Principal): Promise<Principal> {
		const token = await createTokenFor(lab.deps, who.email, 'stream');
		return (await principalOfToken(lab.deps, token))!;
	}
	const listen = async (who: Principal) => ear(await scheduleEvents(lab.deps, who));

	it('tells everyone of taken time, a client of no rival’s request, and nobody of what was rolled back', async () => {
		const [own, rival] = [await lab.client('EA'), await lab.client('EB')];
		const manager = await withToken(await lab.person('manager'));
		const client = await withToken(await lab.person('client', own.id, 'Ada Fenn'));
		const other = await withToken(await lab.person('client', rival.id, 'Cy Rook'));
		const cell = await lab.cell();
		const build = await lab.build(own.code);
		const rivalBuild = await lab.build(rival.code);
		await sleep(QUIET_MS);
		const [staff, mine, theirs] = [await listen(manager), await listen(client), await listen(other)];
		const heard = async (what: string, wanted: [boolean, boolean, boolean], work: () => Promise<unknown>) => {
			await work();
			const [a, b] = [await staff.hears(wanted[0]), await mine.hears(wanted[1])];
			expect([a, b, await theirs.hears(wanted[2])], what).toEqual(wanted);
		};
		let id = '';
		await heard('a request', [true, true, false], async () => {
			({ id } = await lab.request(client, cell.code, build.number, hour(26), hour(30)));
		});
		await heard('its move', [true, true, false], () => moveBooking(lab.deps, client, id, { to: hour(31) }));
		await heard('its confirmation', [true, true, true], () => confirmBooking(lab.deps, manager, id));
		await heard('the slot’s move', [true, true, true], () =>
			moveBooking(lab.deps, manager, id, { from: hour(27), to: hour(32) })
		);
		let closure = '';
		await heard('a closure', [true, true, true], async () => {
			({ id: closure } = await closeCell(lab.deps, manager, {
				cell: cell.code,
				from: hour(60),
				to: hour(62),
				title: 'Service'
			}));
		});
		await heard('its end', [true, true, true], () => removeClosure(lab.deps, manager, closure));
		let clashing = '';
		await heard('a rival’s request', [true, false, true], async () => {
			({ id: clashing } = await lab.request(other, cell.code, rivalBuild.number, hour(28), hour(33)));
		});
		await heard('a refused confirmation', [false, false, false], () =>
			refusal(confirmBooking(lab.deps, manager, clashing))
		);
		await heard('the end of the slot', [true, true, true], () => cancelBooking(lab.deps, client, id));
		await Promise.all([staff, mine, theirs].map((one) => one.close()));
	});

	it('ends when its token is revoked, its person is disabled, or signs out', async () => {
		const email = 'leaver@fellmoor.example';
		await addPerson(lab.deps, { email, name: 'Lee Moor', role: 'engineer', password: PASSWORD });
		const session = await signIn(lab.deps, {
			email,
			password: PASSWORD,
			userAgent: null,
			address: '127.0.0.1'
		});
		const bySession = (await principalOfSession(lab.deps, session))!;
		const token = (await principalOfToken(lab.deps, await createTokenFor(lab.deps, email, 'one')))!;
		const kept = (await principalOfToken(lab.deps, await createTokenFor(lab.deps, email, 'two')))!;
		const [first, second, third] = [await listen(bySession), await listen(token), await listen(kept)];
		await endSession(lab.deps, bySession.via.id);
		const took = [await endsSoon(first)];
		expect([second.hasEnded, third.hasEnded]).toEqual([false, false]);
		await revokeToken(lab.deps, token, token.via.id);
		took.push(await endsSoon(second));
		expect(third.hasEnded).toBe(false);
		await lab.deps.pools.auth
			.updateTable('auth.person')
			.set({ disabledAt: new Date() })
			.where('id', '=', kept.personId)
			.execute();
		took.push(await endsSoon(third));
		console.log(`streams ended after ${took.map((ms) => ms.toFixed(0)).join(', ')} ms`);
		expect((await refusal(scheduleEvents(lab.deps, kept))).status).toBe(503);
	});

	it('ends when it hears no more, and hears again on the next call', async () => {
		const manager = await withToken(await lab.person('manager'));
		const before = await listen(manager);
		const database = new pg.Client({ connectionString: lab.database.url('superuser') });
		await database.connect();
		const connections = async () => {
			const { rows } = await database.query<{ pid: number }>(
				`select pid from pg_stat_activity where application_name = 'trunnion events' and datname = current_database()`
			);
			return rows.map((row) => row.pid);
		};
		const another = await listen(manager);
		expect(await connections(), 'one connection serves all').toHaveLength(1);
		await database.query('select pg_terminate_backend($1)', [(await connections())[0]]);
		await endsSoon(before);
		await endsSoon(another);
		const after = await listen(manager);
		const cell = await lab.cell();
		await closeCell(lab.deps, manager, { cell: cell.code, from: hour(70), to: hour(71), title: 'Service' });
		expect(await after.hears(true)).toBe(true);
		await after.close();
		await database.end();
	});

	it('is not opened without end by one person', async () => {
		const engineer = await withToken(await lab.person('engineer'));
		const open = [];
		for (let n = 0; n < 20; n++) open.push(await listen(engineer));
		expect((await refusal(scheduleEvents(lab.deps, engineer))).status).toBe(429);
		await open[0]!.close();
		open.push(await listen(engineer));
		await Promise.all(open.map((one) => one.close()));
	});
});

describe('over HTTP', () => {
	const stack = useStack();

	it('is never stored, and does not hold up a server that is to stop', async () => {
		const deps = openDeps(readConfig({ ...process.env, ...stack.current.env }), 1);
		await addPerson(deps, { email: 'op@fellmoor.example', name: 'Op', role: 'operator', password: PASSWORD });
		const token = await createTokenFor(deps, 'op@fellmoor.example', 'test');
		await closeDeps(deps);
		const response = await fetch(`${stack.current.origin}/api/v1/schedule/events`, {
			headers: { authorization: `Bearer ${token}` }
		});
		expect(response.status).toBe(200);
		expect(response.headers.get('content-type')).toBe('text/event-stream');
		expect(response.headers.get('cache-control')).toBe('no-store');
		const stream = ear(response);
		const start = performance.now();
		await stack.current.end('web', 'SIGTERM');
		const took = performance.now() - start;
		await stream.done;
		console.log(`the server stopped after ${took.toFixed(0)} ms with a stream open`);
		expect(took).toBeLessThan(SOON_MS);
		await stack.current.start('web');
	});

	it('leads a page that was asked for by another loopback name to the right one', async () => {
		const { port } = new URL(stack.current.origin);
		const ask = (accept: string, method = 'GET') =>
			fetch(`http://127.0.0.1:${port}/sign-in?to=%2Fschedule`, {
				method,
				redirect: 'manual',
				headers: { accept }
			});
		const page = await ask('text/html');
		expect([page.status, page.headers.get('location')]).toEqual([
			307,
			`${stack.current.origin}/sign-in?to=%2Fschedule`
		]);
		expect((await ask('application/json', 'HEAD')).status).toBe(200);
		expect((await fetch(`http://127.0.0.1:${port}/api/v1/health`)).status).toBe(200);
	});
});
