import { readFileSync } from 'node:fs';
import pg from 'pg';
import { setTimeout as sleep } from 'node:timers/promises';
import { beforeAll, describe, expect, it } from 'vitest';
import { addPerson, createTokenFor } from '../../src/lib/server/auth';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { useStack } from '../setup/stack';

/** How a cell weighs torque, in dated versions: which one a run is computed with, and what a later one does to the past. */
const stack = useStack();
const tokens: Record<string, string> = {};

interface Answer {
	status: number;
	etag: string | null;
	json: Record<string, unknown>;
	text: string;
}
interface Run {
	number: string;
	traces: { state: string }[];
	metrics: Record<string, { value: number }>;
	inputs: { torqueChainVersion: number; cellVersion: number } | null;
}

async function call(
	method: string,
	path: string,
	body?: unknown,
	{ as = 'manager', ifMatch = '' } = {}
): Promise<Answer> {
	const bytes = body instanceof Uint8Array;
	const response = await fetch(`${stack.current.origin}/api/v1${path}`, {
		method,
		headers: {
			authorization: `Bearer ${tokens[as]}`,
			...(body === undefined ? {} : { 'content-type': bytes ? 'text/csv' : 'application/json' }),
			...(ifMatch ? { 'if-match': ifMatch } : {})
		},
		...(body === undefined ? {} : { body: bytes ? (body as BodyInit) : JSON.stringify(body) })
	});
	const text = await response.text();
	return {
		status: response.status,
		etag: response.headers.get('etag'),
		json: (text ? JSON.parse(text) : {}) as Record<string, unknown>,
		text
	};
}

async function made(path: string, body: unknown): Promise<Record<string, unknown>> {
	const answer = await call('POST', path, body);
	if (answer.status >= 300) throw new Error(`${path}: ${answer.status} ${answer.text}`);
	return answer.json;
}

const readRun = async (number: string) => (await call('GET', `/runs/${number}`)).json as unknown as Run;

/** The run once its figures come from this version of the chain. */
async function runWith(number: string, version: number): Promise<Run> {
	for (const until = Date.now() + 30_000; Date.now() < until; await sleep(100)) {
		const run = await readRun(number);
		if (run.traces[0]?.state === 'ready' && run.inputs?.torqueChainVersion === version) return run;
	}
	throw new Error(`${number} was not computed with version ${version} within 30 s`);
}

const sweep = new Uint8Array(readFileSync(new URL('../traces/sweep-plain.csv', import.meta.url)));

async function runAt(startedAt: string): Promise<string> {
	const { number } = await made('/runs', {
		build: 'B1',
		cell: 'C1',
		fuelBatch: 'Q1',
		kind: 'power_sweep',
		startedAt,
		ambient: { barometerKpa: 98.2, temperatureC: 27, humidityPct: 48 }
	});
	await made(`/runs/${String(number)}/traces?filename=${startedAt.slice(0, 10)}.csv`, sweep);
	return String(number);
}

beforeAll(async () => {
	const deps = openDeps(readConfig({ ...process.env, ...stack.current.env }), 1);
	try {
		const add = async (name: string, role: 'manager' | 'engineer' | 'client', clientCode?: string) => {
			const email = `${name}@lab.example`;
			await addPerson(deps, {
				email,
				name,
				role,
				password: 'a sentence nobody guesses',
				...(clientCode ? { clientCode } : {})
			});
			tokens[name] = await createTokenFor(deps, email, 'chain');
		};
		await add('manager', 'manager');
		await add('engineer', 'engineer');
		await made('/clients', { code: 'MM', name: 'Moorside Engines' });
		await add('client', 'client', 'MM');
	} finally {
		await closeDeps(deps);
	}
	await made('/cells', {
		code: 'C1',
		name: 'Cell one',
		absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 },
		torqueAt: 'stator',
		rotorInertiaKgM2: 0.3,
		shaftInertiaKgM2: 0.02
	});
	await made('/fuels', { code: 'F1', name: 'Fuel' });
	await made('/fuel-batches', { code: 'Q1', fuel: 'F1', lhvMjKg: 42.7, afrStoich: 14.5 });
	await made('/engines', {
		client: 'MM',
		code: 'E1',
		name: 'Engine',
		displacementL: 2,
		cylinders: 4,
		strokesPerCycle: 4,
		ignition: 'spark',
		inertiaKgM2: 0.15
	});
	await made('/builds', { engine: 'E1', number: 'B1', title: 'Build' });
});

describe('a cell’s torque chain', () => {
	let march = '';
	let june = '';

	it('has a first version from the day the cell is added, and it holds for what was before too', async () => {
		const items = (await call('GET', '/cells/C1/torque-chain')).json.items as Record<string, unknown>[];
		expect(items).toHaveLength(1);
		expect(items[0]).toMatchObject({
			version: 1,
			torqueAt: 'stator',
			rotorInertiaKgM2: 0.3,
			gear: null,
			inForce: { from: null, to: null },
			writtenBy: 'manager'
		});
		[march, june] = [await runAt('2026-03-01T08:00:00Z'), await runAt('2026-06-01T08:00:00Z')];
		await runWith(march, 1);
		await runWith(june, 1);
	});

	it('says which runs a version would touch, and leaves their figures until someone asks', async () => {
		const before = await readRun(june);
		const asked = await call('GET', '/cells/C1/torque-chain/touched?validFrom=2026-05-01T00:00:00Z');
		expect(asked.json).toMatchObject({
			runs: 1,
			traces: 1,
			items: [{ number: june, client: 'MM', version: 1 }]
		});
		const added = await call('POST', '/cells/C1/torque-chain', {
			torqueAt: 'stator',
			rotorInertiaKgM2: 0.9,
			shaftInertiaKgM2: 0.02,
			armM: 0.5,
			gravityMps2: 9.8183,
			validFrom: '2026-05-01T00:00:00Z',
			reason: 'Rotor weighed again by its run-down'
		});
		expect(added.status, added.text).toBe(201);
		expect(added.json).toMatchObject({ version: 2, recomputing: 0, touched: { runs: 1 } });
		// The cell tells the chain in force now; the figures that came from the earlier one stand.
		expect((await call('GET', '/cells/C1')).json).toMatchObject({
			torqueChainVersion: 2,
			rotorInertiaKgM2: 0.9
		});
		await sleep(500);
		expect((await readRun(june)).metrics).toEqual(before.metrics);
	});

	it('computes each run with the version in force at its start', async () => {
		const [old, was] = [await readRun(march), await readRun(june)];
		const queued = await call('POST', '/cells/C1/recompute');
		expect(queued.status, queued.text).toBe(202);
		expect(queued.json).toEqual({ traces: 1 });
		const is = await runWith(june, 2);
		// More rotor behind the ramp: the engine gave more than the stator felt.
		expect(is.metrics.peak_power!.value).toBeGreaterThan(was.metrics.peak_power!.value + 0.5);
		const kept = await readRun(march);
		expect([kept.inputs!.torqueChainVersion, kept.metrics]).toEqual([1, old.metrics]);
		expect((await call('POST', '/cells/C1/recompute')).json).toEqual({ traces: 0 });
		// Uploaded after both were written, and still computed by its start.
		const february = await runAt('2026-02-01T08:00:00Z');
		expect((await runWith(february, 1)).metrics.peak_power).toEqual(old.metrics.peak_power);
	});

	it('computes again in the same breath where that is asked, with the gear', async () => {
		const added = await call('POST', '/cells/C1/torque-chain', {
			torqueAt: 'stator',
			rotorInertiaKgM2: 0,
			shaftInertiaKgM2: 0,
			gear: { ratio: 2, efficiency: 0.96 },
			validFrom: '2026-05-01T00:00:00Z',
			reason: 'The reduction gear was left out',
			recompute: true
		});
		expect(added.json).toMatchObject({ version: 3, recomputing: 1 });
		const run = await runWith(june, 3);
		const flange = await runAt('2026-03-02T08:00:00Z');
		const direct = await runWith(flange, 1);
		expect(run.metrics.peak_power!.value).toBeLessThan(direct.metrics.peak_power!.value / 1.8);
		const versions = (await call('GET', '/cells/C1/torque-chain')).json.items as {
			version: number;
			inForce: { from: string | null; to: string | null } | null;
		}[];
		expect(versions[1]).toMatchObject({ version: 2, inForce: null });
	});

	it('is met through its gear by the absorber check of its own day', async () => {
		await call('POST', '/cells', {
			code: 'C2',
			name: 'Geared',
			absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 5000 },
			gear: { ratio: 2, efficiency: 0.96 }
		});
		await made('/engines', {
			client: 'MM',
			code: 'E2',
			name: 'Fast engine',
			displacementL: 1,
			cylinders: 4,
			strokesPerCycle: 4,
			ignition: 'spark',
			maxSpeedRpm: 9500,
			expectedTorque: [
				[3000, 90],
				[9500, 80]
			]
		});
		await made('/builds', { engine: 'E2', number: 'B2', title: 'Build' });
		const fit = async () =>
			(
				await call('POST', '/schedule/first-fit', {
					build: 'B2',
					kind: 'power_sweep',
					durationMinutes: 60,
					notBefore: '2031-03-01T08:00:00Z',
					notAfter: '2031-03-02T08:00:00Z'
				})
			).json as { slots: { cell: string }[]; refused: { cell: string; reason: string }[] };
		const cellsOf = (slots: { cell: string }[]) => [...new Set(slots.map(({ cell }) => cell))].sort();
		// Both are geared two to one by now: 9500 rev/min of the engine are 4750 of the machine.
		expect(cellsOf((await fit()).slots)).toEqual(['C1', 'C2']);
		await call('POST', '/cells/C2/torque-chain', {
			torqueAt: 'flange',
			reason: 'Gear taken out',
			validFrom: '2031-01-01T00:00:00Z'
		});
		const { slots, refused } = await fit();
		expect(cellsOf(slots)).toEqual(['C1']);
		expect(refused.find(({ cell }) => cell === 'C2')?.reason).toContain('the machine 5000 rev/min at most');
	});

	it('is the manager’s to write, and tells a client neither why nor by whom', async () => {
		const body = { torqueAt: 'flange', reason: 'x' };
		expect((await call('POST', '/cells/C1/torque-chain', body, { as: 'engineer' })).status).toBe(403);
		expect((await call('POST', '/cells/C1/torque-chain', body, { as: 'client' })).status).toBe(403);
		const seen = await call('GET', '/cells/C1/torque-chain', undefined, { as: 'client' });
		expect(seen.status).toBe(200);
		expect(seen.text).not.toContain('Rotor weighed');
		expect((seen.json.items as { reason: unknown; writtenBy: unknown }[])[0]).toMatchObject({
			reason: null,
			writtenBy: null
		});
	});

	it('refuses what cannot be, each at its field', async () => {
		const bad = await call('POST', '/cells/C1/torque-chain', {
			torqueAt: 'pedestal',
			gravityMps2: 981,
			gear: { ratio: 2, efficiency: 96 }
		});
		expect(bad.status).toBe(400);
		expect(Object.keys(bad.json.errors as object).sort()).toEqual(
			['gear.efficiency', 'gravityMps2', 'reason', 'torqueAt'].sort()
		);
	});

	it('keeps versions from being edited or removed, by the database itself', async () => {
		const login = new pg.Client({ connectionString: stack.current.env.DATABASE_URL_LAB });
		await login.connect();
		try {
			for (const change of ['update torque_chain set reason = $$x$$', 'delete from torque_chain'])
				await expect(login.query(change)).rejects.toMatchObject({ code: '42501' });
		} finally {
			await login.end();
		}
		const rival = new pg.Client({ connectionString: stack.current.env.DATABASE_URL_CLIENT });
		await rival.connect();
		try {
			expect((await rival.query('select version from torque_chain')).rows).toEqual([]);
			await expect(rival.query('select reason from torque_chain')).rejects.toMatchObject({ code: '42501' });
		} finally {
			await rival.end();
		}
	});
});

describe('changing a cell', () => {
	it('changes what is named and keeps the rest, and refuses what changed meanwhile', async () => {
		const read = await call('GET', '/cells/C1');
		const change = {
			name: 'Cell one, rebuilt',
			rigUpMinutes: 45,
			fuels: ['F1'],
			openingHours: [{ day: 1, from: '07:00', to: '24:00' }]
		};
		const mine = await call('PATCH', '/cells/C1', change, { ifMatch: read.etag! });
		expect(mine.status, mine.text).toBe(200);
		expect(mine.json).toMatchObject({ ...change, rigDownMinutes: 0, absorber: { maxPowerKw: 300 } });
		const late = await call('PATCH', '/cells/C1', { name: 'Late' }, { ifMatch: read.etag! });
		expect(late.status).toBe(412);
		expect((await call('PATCH', '/cells/C1', { fuels: null, openingHours: null })).json).toMatchObject({
			name: change.name,
			fuels: null,
			openingHours: null
		});
	});
	it('says at the field what is wrong, and where the torque chain is written', async () => {
		const unknown = await call('PATCH', '/cells/C1', { fuels: ['NONE'] });
		expect((unknown.json.errors as Record<string, string>)['fuels.0']).toContain('there is no fuel NONE');
		const chain = await call('PATCH', '/cells/C1', { torqueAt: 'stator' });
		expect(chain.text).toContain('POST /cells/{id}/torque-chain');
	});
});
