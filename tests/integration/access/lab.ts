import { readFileSync } from 'node:fs';
import { ROLES, type Role } from '../../../src/lib/server/access';
import { addPerson, createTokenFor } from '../../../src/lib/server/auth';
import { readConfig } from '../../../src/lib/server/config';
import { closeDeps, openDeps } from '../../../src/lib/server/deps';
import type { Stack } from '../../setup/stack';
import { PNG } from '../files';

/** Stands in every text of client B: it must never reach client A. */
export const CANARY = 'CANARY-7F3A';
export const PASSWORD = 'a sentence nobody guesses';
export const ABSENT = '99999999-9999-4999-8999-999999999999';

/** What each kind of thing is called, by client. */
export interface Things {
	client: string;
	engine: string;
	build: string;
	batch: string;
	limitSet: string;
	booking: string;
	run: string;
	trace: string;
	runAttachment: string;
	buildAttachment: string;
	batchAttachment: string;
	token: string;
}

export interface AccessLab {
	tokens: Record<Role | 'rival', string>;
	cell: string;
	fuel: string;
	closure: string;
	own: Things;
	foreign: Things;
	call(token: string | null, method: string, path: string, body?: unknown): Promise<Answer>;
}

export interface Answer {
	status: number;
	text: string;
}

/** Six roles, client A whose person asks, and its rival B with a canary in every text. */
export async function makeAccessLab(stack: Stack): Promise<AccessLab> {
	const deps = openDeps(readConfig({ ...process.env, ...stack.env }), 2);
	const call: AccessLab['call'] = async (token, method, path, body) => {
		const bytes = body instanceof Uint8Array;
		const response = await fetch(`${stack.origin}/api/v1${path}`, {
			method,
			headers: {
				...(token ? { authorization: `Bearer ${token}` } : {}),
				...(body === undefined ? {} : { 'content-type': bytes ? 'text/csv' : 'application/json' })
			},
			...(body === undefined ? {} : { body: bytes ? (body as BodyInit) : JSON.stringify(body) })
		});
		return { status: response.status, text: await textOf(response) };
	};
	try {
		const tokens = {} as AccessLab['tokens'];
		for (const role of ROLES.filter((each) => each !== 'client')) {
			await addPerson(deps, { email: `${role}@lab.example`, name: role, role, password: PASSWORD });
			tokens[role] = await createTokenFor(deps, `${role}@lab.example`, 'matrix');
		}
		const made = async (token: string, path: string, body: unknown) => {
			const answer = await call(token, 'POST', path, body);
			if (answer.status >= 300) throw new Error(`${path}: ${answer.status} ${answer.text}`);
			return JSON.parse(answer.text) as { id: string };
		};
		const manager = tokens.manager;
		const cell = await made(manager, '/cells', {
			code: 'C1',
			name: 'Cell',
			absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 }
		});
		const fuel = await made(manager, '/fuels', { code: 'F1', name: 'Fuel' });
		const closure = await made(manager, '/closures', {
			cell: 'C1',
			from: '2031-01-01T08:00:00Z',
			to: '2031-01-01T09:00:00Z',
			title: 'Service'
		});
		const things = async (code: string, text: string, day: number): Promise<Things> => {
			const client = await made(manager, '/clients', { code, name: `${text} Company` });
			const role = code === 'AA' ? 'client' : 'rival';
			await addPerson(deps, {
				email: `${role}@${code.toLowerCase()}.example`,
				name: `${text} Person`,
				role: 'client',
				clientCode: code,
				password: PASSWORD
			});
			tokens[role] = await createTokenFor(deps, `${role}@${code.toLowerCase()}.example`, 'matrix');
			const engine = await made(manager, '/engines', {
				client: code,
				code: `E-${text}`,
				name: `${text} engine`,
				displacementL: 1.998,
				cylinders: 4,
				strokesPerCycle: 4,
				ignition: 'spark'
			});
			const build = await made(manager, '/builds', {
				client: code,
				engine: engine.id,
				number: `B-${text}`,
				title: `${text} build`,
				parts: [{ name: text, value: text }]
			});
			const batch = await made(manager, '/fuel-batches', {
				client: code,
				fuel: 'F1',
				code: `Q-${text}`,
				lhvMjKg: 42.7,
				afrStoich: 14.5
			});
			const limitSet = await made(manager, '/limit-sets', {
				client: code,
				code: `L-${text}`,
				title: `${text} limits`,
				rules: [
					{
						title: `${text} rule`,
						subject: { channel: 'speed' },
						relation: 'at_most',
						limit: 7000,
						holdS: 0,
						severity: 'review'
					}
				]
			});
			const booking = await made(tokens[role], '/bookings', {
				cell: 'C1',
				build: build.id,
				from: `2031-02-0${day}T08:00:00Z`,
				to: `2031-02-0${day}T12:00:00Z`,
				purpose: text
			});
			const run = await made(tokens.operator, '/runs', {
				client: code,
				build: build.id,
				cell: 'C1',
				fuelBatch: batch.id,
				limitSet: limitSet.id,
				kind: 'power_sweep',
				startedAt: '2026-03-01T08:00:00Z',
				ambient: { barometerKpa: 98.2, temperatureC: 27, humidityPct: 48 }
			});
			await made(tokens.operator, `/runs/${run.id}/log`, { text });
			await made(tokens.operator, `/runs/${run.id}/flag`, { reason: text });
			const sweep = readFileSync(new URL('../../traces/sweep-plain.csv', import.meta.url));
			const trace = await made(
				tokens.operator,
				`/runs/${run.id}/traces?filename=${text}.csv`,
				new Uint8Array(sweep)
			);
			const attach = async (path: string) =>
				(await made(manager, `${path}/attachments?filename=${text}.png`, PNG)).id;
			await settled(call, manager, run.id);
			return {
				client: client.id,
				engine: engine.id,
				build: build.id,
				batch: batch.id,
				limitSet: limitSet.id,
				booking: booking.id,
				run: run.id,
				trace: trace.id,
				runAttachment: await attach(`/runs/${run.id}`),
				buildAttachment: await attach(`/builds/${build.id}`),
				batchAttachment: await attach(`/fuel-batches/${batch.id}`),
				token: tokens[role]
			};
		};
		const own = await things('AA', 'OWN', 2);
		const foreign = await things('BB', CANARY, 3);
		return { tokens, cell: cell.id, fuel: fuel.id, closure: closure.id, own, foreign, call };
	} finally {
		await closeDeps(deps);
	}
}

/** Of a stream that stays open, what it begins with. */
async function textOf(response: Response): Promise<string> {
	if (response.headers.get('content-type') !== 'text/event-stream') return response.text();
	const reader = response.body!.getReader();
	const { value } = await reader.read();
	await reader.cancel();
	return new TextDecoder().decode(value);
}

async function settled(call: AccessLab['call'], token: string, run: string): Promise<void> {
	for (const until = Date.now() + 60_000; Date.now() < until;) {
		const { traces } = JSON.parse((await call(token, 'GET', `/runs/${run}`)).text) as {
			traces: { state: string; error: string | null }[];
		};
		if (traces[0]?.state === 'ready') return;
		if (traces[0]?.state === 'refused') throw new Error(traces[0].error ?? 'refused');
		await new Promise((done) => setTimeout(done, 100));
	}
	throw new Error('the trace was not ready within a minute');
}

/** An answer without what may differ between two requests for different ids: the id itself, and the request's own. */
export function blind(answer: Answer, ...refs: string[]): string {
	let text = answer.text
		.replace(/"requestId":"[^"]*"/g, '"requestId":"…"')
		.replace(/requestId:"[^"]*"/g, 'requestId:"…"');
	for (const ref of refs) text = text.replaceAll(ref, '…');
	return `${answer.status} ${text}`;
}
