import { beforeAll, describe, expect, it } from 'vitest';
import { addPerson, createTokenFor } from '../../src/lib/server/auth';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { useStack } from '../setup/stack';

/** How the API behaves whatever the subject: keys, versions, problem documents, sign-in and tokens. */
const stack = useStack();
const PASSWORD = 'a sentence nobody guesses';
let token = '';

interface Reply {
	status: number;
	headers: Headers;
	json: Record<string, unknown>;
	text: string;
}

async function call(
	method: string,
	path: string,
	body?: unknown,
	headers: Record<string, string> = {}
): Promise<Reply> {
	const response = await fetch(`${stack.current.origin}/api/v1${path}`, {
		method,
		headers: {
			authorization: `Bearer ${token}`,
			...(body === undefined ? {} : { 'content-type': 'application/json' }),
			...headers
		},
		...(body === undefined ? {} : { body: typeof body === 'string' ? body : JSON.stringify(body) })
	});
	const text = await response.text();
	const isJson = response.headers.get('content-type')?.includes('json');
	return {
		status: response.status,
		headers: response.headers,
		text,
		json: isJson ? (JSON.parse(text) as Record<string, unknown>) : {}
	};
}

const signIn = (email: string, password: string) =>
	fetch(`${stack.current.origin}/sign-in`, {
		method: 'POST',
		redirect: 'manual',
		headers: {
			origin: stack.current.origin,
			accept: 'text/html',
			'content-type': 'application/x-www-form-urlencoded'
		},
		body: new URLSearchParams({ email, password }).toString()
	});

beforeAll(async () => {
	const deps = openDeps(readConfig({ ...process.env, ...stack.current.env }), 1);
	for (const name of ['manager', 'engineer', 'guessed'])
		await addPerson(deps, {
			email: `${name}@lab.example`,
			name,
			role: name === 'guessed' ? 'operator' : (name as 'manager'),
			password: PASSWORD
		});
	token = await createTokenFor(deps, 'manager@lab.example', 'manner');
	await closeDeps(deps);
	await call('POST', '/clients', { code: 'MM', name: 'Manner' });
	await call('POST', '/cells', {
		code: 'C1',
		name: 'C',
		absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 }
	});
	await call('POST', '/fuels', { code: 'F1', name: 'F' });
	await call('POST', '/fuel-batches', { code: 'Q1', fuel: 'F1' });
	await call('POST', '/engines', {
		client: 'MM',
		code: 'E1',
		name: 'E',
		displacementL: 2,
		cylinders: 4,
		strokesPerCycle: 4,
		ignition: 'spark'
	});
	await call('POST', '/builds', { engine: 'E1', number: 'B1', title: 'B' });
});

const run = { build: 'B1', cell: 'C1', fuelBatch: 'Q1', kind: 'free_log', startedAt: '2026-03-01T08:00:00Z' };

describe('Idempotency-Key', () => {
	it('makes one effect of a request sent again, and answers it byte for byte', async () => {
		const headers = { 'idempotency-key': 'open-1' };
		const first = await call('POST', '/runs', run, headers);
		const again = await call('POST', '/runs', run, headers);
		expect([first.status, again.status]).toEqual([201, 201]);
		expect(again.text).toBe(first.text);
		const { items } = (await call('GET', '/runs')).json as { items: { number: string }[] };
		expect(items.filter(({ number }) => number === first.json.number)).toHaveLength(1);
	});

	it('makes one effect of twenty at once: the others wait or are told', async () => {
		const before = ((await call('GET', '/runs?limit=200')).json.items as unknown[]).length;
		const replies = await Promise.all(
			Array.from({ length: 20 }, () => call('POST', '/runs', run, { 'idempotency-key': 'open-2' }))
		);
		expect(replies.filter(({ status }) => status === 201).length).toBeGreaterThan(0);
		for (const reply of replies) expect([201, 409]).toContain(reply.status);
		expect(new Set(replies.filter(({ status }) => status === 201).map(({ text }) => text)).size).toBe(1);
		expect(((await call('GET', '/runs?limit=200')).json.items as unknown[]).length).toBe(before + 1);
	});

	it('refuses a key that came with another request, and leaves a refused one free', async () => {
		await call('POST', '/runs', run, { 'idempotency-key': 'open-3' });
		const other = await call('POST', '/runs', { ...run, kind: 'motoring' }, { 'idempotency-key': 'open-3' });
		expect(other.status).toBe(422);
		const wrong = await call('POST', '/runs', { ...run, build: 'NONE' }, { 'idempotency-key': 'open-4' });
		expect(wrong.status).toBe(400);
		const right = await call('POST', '/runs', run, { 'idempotency-key': 'open-4' });
		expect(right.status).toBe(201);
	});
});

describe('ETag and If-Match', () => {
	it('changes what was read, and refuses what changed meanwhile', async () => {
		const read = await call('GET', '/builds/B1');
		const tag = read.headers.get('etag')!;
		expect(tag).toMatch(/^"\d+"$/);
		const mine = await call('PATCH', '/builds/B1', { state: 'ready' }, { 'if-match': tag });
		expect(mine.status).toBe(200);
		expect(mine.headers.get('etag')).not.toBe(tag);
		const late = await call('PATCH', '/builds/B1', { state: 'retired' }, { 'if-match': tag });
		expect(late.status).toBe(412);
		expect(late.headers.get('content-type')).toContain('application/problem+json');
		expect((await call('GET', '/builds/B1')).json.state).toBe('ready');
	});
});

describe('problem documents', () => {
	it.each([
		[
			'a field of the wrong kind',
			'/engines',
			{ code: 'E2', name: 'E', displacementL: 'two' },
			400,
			'displacementL'
		],
		['a code with small letters', '/clients', { code: 'mm', name: 'x' }, 400, 'code'],
		[
			'a code that looks like an id',
			'/clients',
			{ code: '9999AAAA-9999-4999-8999-9999AAAAAAAA', name: 'x' },
			400,
			'code'
		],
		[
			'a diesel without induction',
			'/engines',
			{
				client: 'MM',
				code: 'E3',
				name: 'E',
				displacementL: 2,
				cylinders: 4,
				strokesPerCycle: 4,
				ignition: 'compression'
			},
			400,
			'induction'
		],
		[
			'hPa where kPa belong',
			'/runs',
			{ ...run, ambient: { barometerKpa: 1013 } },
			400,
			'ambient.barometerKpa'
		],
		['a name that nothing has', '/runs', { ...run, cell: 'C9' }, 400, 'cell'],
		['an ill-formed time', '/runs', { ...run, startedAt: 'yesterday' }, 400, 'startedAt'],
		['a taken code', '/clients', { code: 'MM', name: 'x' }, 409, 'code']
	])('%s', async (_what, path, body, status, field) => {
		const reply = await call('POST', path, body);
		expect(reply.status).toBe(status);
		expect(reply.headers.get('content-type')).toBe('application/problem+json');
		expect(reply.json).toMatchObject({ type: 'about:blank', status });
		expect((reply.json.errors as Record<string, string>)[field], reply.text).toBeTruthy();
	});

	it('tells broken JSON, other types and too large bodies apart', async () => {
		expect((await call('POST', '/clients', '{"code":')).status).toBe(400);
		expect((await call('POST', '/clients', 'code=MM', { 'content-type': 'text/plain' })).status).toBe(415);
		expect((await call('POST', '/clients', JSON.stringify({ code: 'X'.repeat(1_100_000) }))).status).toBe(
			413
		);
		const nul = await call('POST', '/clients', { code: 'NUL', name: 'a\u0000b' });
		expect(nul.status).toBe(400);
	});

	it('takes `client` where several have the code, and asks for it', async () => {
		await call('POST', '/clients', { code: 'M2', name: 'Other' });
		await call('POST', '/engines', {
			client: 'M2',
			code: 'E1',
			name: 'E',
			displacementL: 1,
			cylinders: 1,
			strokesPerCycle: 2,
			ignition: 'spark'
		});
		const asked = await call('POST', '/builds', { engine: 'E1', number: 'B7', title: 'B' });
		expect(asked.status).toBe(400);
		expect((asked.json.errors as Record<string, string>).client).toBeTruthy();
		const told = await call('POST', '/builds', { client: 'M2', engine: 'E1', number: 'B7', title: 'B' });
		expect([told.status, told.json.client]).toEqual([201, 'M2']);
	});
});

describe('an upload', () => {
	it.each([undefined, 'application/x-www-form-urlencoded', 'text/plain', 'multipart/form-data; boundary=x'])(
		'with the content type %s arrives as it was sent',
		async (type) => {
			const { id } = (await call('POST', '/runs', run)).json;
			const bytes = new TextEncoder().encode('time [s],speed [rpm]\n0,1\n0.1,2\n');
			const response = await fetch(
				`${stack.current.origin}/api/v1/runs/${id as string}/traces?filename=t.csv`,
				{
					method: 'POST',
					headers: { authorization: `Bearer ${token}`, ...(type ? { 'content-type': type } : {}) },
					body: bytes
				}
			);
			expect(response.status).toBe(202);
			const { traces } = (await call('GET', `/runs/${id as string}`)).json as {
				traces: { sizeBytes: number; filename: string }[];
			};
			expect(traces).toMatchObject([{ sizeBytes: bytes.length, filename: 't.csv' }]);
		}
	);

	it('of nothing is kept as an empty file and refused', async () => {
		const { id } = (await call('POST', '/runs', run)).json;
		const sent = await call('POST', `/runs/${id as string}/traces?filename=none.csv`);
		expect(sent.status).toBe(202);
		for (
			const until = Date.now() + 20_000;
			Date.now() < until;
			await new Promise((go) => setTimeout(go, 100))
		) {
			const { traces } = (await call('GET', `/runs/${id as string}`)).json as {
				traces: { state: string; sizeBytes: number }[];
			};
			if (traces[0]!.state === 'refused') return expect(traces[0]!.sizeBytes).toBe(0);
		}
		throw new Error('the empty file was not refused within 20 s');
	});
});

describe('health and description', () => {
	it('names each dependency', async () => {
		expect((await call('GET', '/health')).json).toEqual({
			status: 'ok',
			database: 'ok',
			storage: 'ok',
			mail: 'ok',
			worker: 'ok',
			version: expect.any(String)
		});
	});

	it('describes every operation with its schemas', async () => {
		const { json } = await call('GET', '/openapi.json');
		expect(json.openapi).toBe('3.1.0');
		const paths = json.paths as Record<
			string,
			Record<string, { requestBody?: unknown; responses: Record<string, unknown> }>
		>;
		expect(Object.keys(paths)).toContain('/runs/{id}/traces');
		expect(JSON.stringify(paths['/bookings']!.post!.requestBody)).toContain('fuelBatch');
	});
});

describe('sign-in', () => {
	it('gives a cookie that only the server reads, new each time, and dead after sign-out', async () => {
		const first = await signIn('engineer@lab.example', PASSWORD);
		const cookie = first.headers.get('set-cookie')!;
		expect(first.status).toBe(303);
		expect(cookie).toMatch(/HttpOnly/i);
		expect(cookie).toMatch(/SameSite=Lax/i);
		const value = cookie.split(';')[0]!;
		const second = (await signIn('Engineer@Lab.Example', PASSWORD)).headers.get('set-cookie')!.split(';')[0]!;
		expect(second).not.toBe(value);
		const page = (session: string) =>
			fetch(`${stack.current.origin}/runs`, { headers: { cookie: session }, redirect: 'manual' });
		expect((await page(value)).status).toBe(200);
		await fetch(`${stack.current.origin}/sign-out`, {
			method: 'POST',
			redirect: 'manual',
			headers: {
				cookie: value,
				origin: stack.current.origin,
				accept: 'text/html',
				'content-type': 'application/x-www-form-urlencoded'
			}
		});
		expect((await page(value)).status).toBe(303);
		expect((await page(second)).status).toBe(200);
	});

	it('says the same of a wrong password and an unknown address, and leads nowhere else', async () => {
		const wrong = await signIn('engineer@lab.example', 'wrong wrong wrong');
		const unknown = await signIn('nobody@lab.example', 'wrong wrong wrong');
		expect([wrong.status, unknown.status]).toEqual([401, 401]);
		const plain = async (reply: Response, email: string) =>
			(await reply.text()).replaceAll(email, '…').replace(/nonce="[^"]*"/g, '');
		expect(await plain(wrong, 'engineer@lab.example')).toBe(await plain(unknown, 'nobody@lab.example'));
		const elsewhere = await fetch(`${stack.current.origin}/sign-in?to=//elsewhere.example`, {
			method: 'POST',
			redirect: 'manual',
			headers: {
				origin: stack.current.origin,
				accept: 'text/html',
				'content-type': 'application/x-www-form-urlencoded'
			},
			body: new URLSearchParams({ email: 'engineer@lab.example', password: PASSWORD }).toString()
		});
		expect(elsewhere.headers.get('location')).toBe('/');
	});

	it('stops guessing after ten tries, whatever address the guesser claims', async () => {
		const statuses = [];
		for (let i = 0; i < 12; i++)
			statuses.push((await signIn('guessed@lab.example', `guess number ${i}`)).status);
		expect(statuses.slice(0, 10)).toEqual(Array(10).fill(401));
		expect(statuses.slice(10)).toEqual([429, 429]);
		// Even the right password waits now; other accounts do not.
		expect((await signIn('guessed@lab.example', PASSWORD)).status).toBe(429);
		expect((await signIn('engineer@lab.example', PASSWORD)).status).toBe(303);
	});
});

describe('responses', () => {
	it('carry the headers that keep a browser from mischief', async () => {
		const cookie = (await signIn('engineer@lab.example', PASSWORD)).headers.get('set-cookie')!.split(';')[0]!;
		const page = await fetch(`${stack.current.origin}/runs`, { headers: { cookie } });
		expect(page.headers.get('content-security-policy')).toMatch(
			/default-src 'self'.*script-src 'self' 'nonce-/
		);
		expect(page.headers.get('content-security-policy')).not.toMatch(/unsafe-(inline|eval)/);
		expect(page.headers.get('cache-control')).toContain('no-store');
		expect(page.headers.get('x-content-type-options')).toBe('nosniff');
		expect(page.headers.get('x-frame-options')).toBe('DENY');
	});
});
