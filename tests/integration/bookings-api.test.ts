import type { RequestEvent } from '@sveltejs/kit';
import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import * as bookings from '../../src/routes/api/v1/bookings/+server';
import * as booking from '../../src/routes/api/v1/bookings/[id]/+server';
import * as confirm from '../../src/routes/api/v1/bookings/[id]/confirm/+server';
import * as closures from '../../src/routes/api/v1/closures/+server';
import * as closure from '../../src/routes/api/v1/closures/[id]/+server';
import * as schedule from '../../src/routes/api/v1/schedule/+server';
import * as firstFit from '../../src/routes/api/v1/schedule/first-fit/+server';
import { hour, useBookingLab } from './booking-lab';

const lab = useBookingLab();

interface Sent {
	id?: string;
	body?: unknown;
	headers?: Record<string, string>;
	query?: string;
}

/** The answer of a route to one request of this person, as the server calls it. */
async function call(
	handler: (event: never) => Response | Promise<Response>,
	who: Principal | null,
	method: string,
	{ id, body, headers = {}, query = '' }: Sent = {}
) {
	const url = new URL(`http://127.0.0.1/api/v1/x${id ? `/${id}` : ''}${query}`);
	const request = new Request(url, {
		method,
		headers: { ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
		...(body === undefined ? {} : { body: JSON.stringify(body) })
	});
	const locals = { deps: lab.deps, who, requestId: randomUUID(), theme: 'system' };
	const event = { url, request, params: id ? { id } : {}, locals } as unknown as RequestEvent;
	const answer = await handler(event as never);
	const text = await answer.text();
	const json = (text ? JSON.parse(text) : null) as Record<string, unknown> & { items: unknown[] };
	return { status: answer.status, headers: answer.headers, json };
}

async function scene(code: string) {
	const own = await lab.client(code);
	const [manager, client] = [await lab.person('manager'), await lab.person('client', own.id)];
	const [cell, build] = [await lab.cell(), await lab.build(code)];
	const body = {
		cell: cell.code,
		build: build.number,
		from: '2027-03-03T08:00:00+01:00',
		to: '2027-03-03T12:00:00+01:00'
	};
	return { manager, client, cell, build, body };
}

describe('bookings over the API', () => {
	it('are requested, read, moved and confirmed, with versions that guard each change', async () => {
		const { manager, client, body } = await scene('PA');
		const asked = await call(bookings.POST, client, 'POST', { body });
		expect([asked.status, asked.headers.get('etag')]).toEqual([201, '"1"']);
		expect(asked.json).toMatchObject({
			number: 'PA-B-0001',
			state: 'requested',
			from: '2027-03-03T07:00:00.000Z'
		});
		const id = String(asked.json.number);
		const move = { body: { to: '2027-03-03T13:00:00+01:00' } };
		const moved = await call(booking.PATCH, client, 'PATCH', { id, ...move, headers: { 'if-match': '"1"' } });
		expect([moved.status, moved.headers.get('etag')]).toEqual([200, '"2"']);
		const stale = await call(confirm.POST, manager, 'POST', { id, body: {}, headers: { 'if-match': '"1"' } });
		expect([stale.status, stale.json.title]).toEqual([412, 'Changed meanwhile']);
		// Without a body too: the reason is optional.
		const confirmed = await call(confirm.POST, manager, 'POST', { id });
		expect([confirmed.status, confirmed.json.state]).toEqual([200, 'confirmed']);
		expect((await call(booking.GET, client, 'GET', { id })).json).toMatchObject({ version: 3 });
		expect((await call(bookings.GET, client, 'GET', { query: '?state=confirmed' })).json.items).toHaveLength(
			1
		);
	});

	it('clash as a problem document that says with what', async () => {
		const { manager, client, cell, body } = await scene('PB');
		const ids: string[] = [];
		for (let i = 0; i < 2; i++)
			ids.push(String((await call(bookings.POST, client, 'POST', { body })).json.id));
		await call(confirm.POST, manager, 'POST', { id: ids[0]! });
		const clash = await call(confirm.POST, manager, 'POST', { id: ids[1]! });
		expect(clash.status).toBe(409);
		expect(clash.headers.get('content-type')).toBe('application/problem+json');
		expect(clash.json).toMatchObject({
			status: 409,
			detail: `${cell.code} is taken by PB-B-0001 from Wed 3 Mar 2027 08:00 to 12:00, rigging included (Europe/Stockholm).`,
			clashesWith: [{ number: 'PB-B-0001', cell: cell.code }]
		});
	});

	it('are made once, however often the same key is sent', async () => {
		const { client, body } = await scene('PC');
		const send = () =>
			call(bookings.POST, client, 'POST', { body, headers: { 'idempotency-key': 'again-and-again' } });
		const [first, again] = [await send(), await send()];
		expect(again.status).toBe(201);
		expect(again.json).toEqual(first.json);
		expect((await call(bookings.GET, client, 'GET')).json.items).toHaveLength(1);
	});

	it('say at which field the input is wrong, and know nobody without a token', async () => {
		const { client, body } = await scene('PD');
		const wrong = await call(bookings.POST, client, 'POST', {
			body: { ...body, from: '2027-03-03 08:00', kind: 'x' }
		});
		expect(wrong.status).toBe(400);
		expect(wrong.json.errors).toMatchObject({
			from: expect.stringContaining('give a time like'),
			kind: expect.stringContaining('is one of power_sweep')
		});
		const before = await call(bookings.POST, client, 'POST', { body: { ...body, to: body.from } });
		expect(before.json.errors).toEqual({ to: 'must be later than from.' });
		expect((await call(bookings.POST, null, 'POST', { body })).status).toBe(401);
		const operator = await lab.person('operator');
		expect((await call(bookings.POST, operator, 'POST', { body })).status).toBe(403);
	});
});

describe('the schedule over the API', () => {
	it('answers in the described shape, also for a client', async () => {
		const { manager, client, cell, build } = await scene('PE');
		const shut = await call(closures.POST, manager, 'POST', {
			body: { cell: cell.code, from: hour(5).toISOString(), to: hour(7).toISOString(), title: 'Visit' }
		});
		expect(shut.status).toBe(201);
		const seen = await call(schedule.GET, client, 'GET', { query: '?from=2027-03-01&to=2027-03-02' });
		expect(seen.status).toBe(200);
		const mine = (seen.json.cells as { code: string; entries: unknown[] }[]).find(
			(c) => c.code === cell.code
		);
		expect(mine!.entries).toEqual([
			{ kind: 'closed', from: hour(5).toISOString(), to: hour(7).toISOString() }
		]);
		const fit = await call(firstFit.POST, client, 'POST', {
			body: {
				build: build.number,
				kind: 'power_sweep',
				durationMinutes: 240,
				notBefore: hour(4).toISOString(),
				notAfter: hour(14).toISOString()
			}
		});
		expect(fit.status).toBe(200);
		expect(fit.json.slots).toContainEqual(
			expect.objectContaining({ cell: cell.code, from: hour(7).toISOString() })
		);
		const removed = await call(closure.DELETE, manager, 'DELETE', { id: String(shut.json.id) });
		expect([removed.status, removed.json]).toEqual([204, null]);
	});
});
