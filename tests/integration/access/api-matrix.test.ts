import { beforeAll, describe, expect, it } from 'vitest';
import { ROLES, type Role } from '../../../src/lib/server/access';
import { useStack } from '../../setup/stack';
import { PNG } from '../files';
import { ABSENT, blind, CANARY, makeAccessLab, PASSWORD, type AccessLab, type Things } from './lab';

/**
 * Every operation of the API × every role × own, foreign and absent ids, made from the API's own description: a new route
 * is in it by itself, and fails here until its body is told below.
 */
const stack = useStack();
let lab: AccessLab;

interface Described {
	operationId: string;
	'x-roles': Role[];
	requestBody?: { content: Record<string, unknown> };
	parameters: { name: string; in: string; required: boolean }[];
}
interface Operation {
	method: string;
	path: string;
	described: Described;
}
let operations: Operation[] = [];

const from = '2031-03-01T08:00:00Z';
const to = '2031-03-01T10:00:00Z';
const absorber = { kind: 'ac', maxPowerKw: 1, maxTorqueNm: 1, maxSpeedRpm: 1 };
const rule = {
	title: 'r',
	subject: { channel: 'speed' },
	relation: 'at_most',
	limit: 1,
	holdS: 0,
	severity: 'note'
};

/** A right body for every operation that takes one, speaking of these things. */
const BODIES: Record<string, (things: Things) => unknown> = {
	createClient: () => ({ code: code('N'), name: 'New' }),
	createCell: () => ({ code: code('C'), name: 'New', absorber }),
	changeCell: () => ({ rigUpMinutes: 30 }),
	addTorqueChain: () => ({ torqueAt: 'flange', reason: 'matrix' }),
	createFuel: () => ({ code: code('F'), name: 'New' }),
	createFuelBatch: ({ client }) => ({ client, fuel: 'F1', code: code('Q') }),
	createEngine: ({ client }) => ({
		client,
		code: code('E'),
		name: 'New',
		displacementL: 1,
		cylinders: 1,
		strokesPerCycle: 4,
		ignition: 'spark'
	}),
	createBuild: ({ client, engine }) => ({ client, engine, number: code('B'), title: 'New' }),
	changeBuild: () => ({ state: 'ready' }),
	changeEngine: () => ({ name: 'Changed' }),
	changeFuel: () => ({ name: 'Changed' }),
	changeFuelBatch: () => ({ ron: 95 }),
	createLimitSet: ({ client }) => ({ client, code: code('L'), title: 'New', rules: [rule] }),
	addLimitSetVersion: () => ({ rules: [rule] }),
	requestBooking: ({ build }) => ({ cell: 'C1', build, from, to }),
	moveBooking: () => ({ from, to }),
	confirmBooking: () => ({}),
	declineBooking: () => ({ reason: 'matrix' }),
	cancelBooking: () => ({ reason: 'matrix' }),
	closeCell: () => ({ cell: 'C1', from: '2031-01-02T08:00:00Z', to: '2031-01-02T09:00:00Z', title: 'x' }),
	findSlots: ({ build }) => ({
		build,
		kind: 'power_sweep',
		durationMinutes: 60,
		notBefore: from,
		notAfter: to
	}),
	openRun: ({ client, build, batch }) => ({
		client,
		build,
		cell: 'C1',
		fuelBatch: batch,
		kind: 'free_log',
		startedAt: from
	}),
	acceptRun: () => ({ reason: 'matrix' }),
	voidRun: () => ({ reason: 'matrix' }),
	flagRun: () => ({ reason: 'matrix' }),
	addLogLine: () => ({ text: 'matrix' }),
	changeRun: () => ({ net: true }),
	answerCheck: () => ({ item: 'guards', answer: 'done' }),
	addReading: () => ({ barometerKpa: 99.1 }),
	placeTrace: () => ({ timeOffsetS: 2 }),
	mapTrace: () => ({ columns: [{ index: 0, channel: 'time', unit: 's' }] }),
	addRunAttachment: () => PNG,
	addBuildAttachment: () => PNG,
	addFuelBatchAttachment: () => PNG,
	removeRunAttachment: () => ({ reason: 'matrix' }),
	removeBuildAttachment: () => ({ reason: 'matrix' }),
	removeFuelBatchAttachment: () => ({ reason: 'matrix' }),
	addPerson: ({ client }) => ({ email: `${code('p')}@x.example`, name: 'New', role: 'client', client }),
	changePerson: () => ({ name: 'Renamed' }),
	disablePerson: () => ({}),
	changeMe: () => ({ units: 'us' }),
	changePassword: () => ({ old: PASSWORD, new: PASSWORD }),
	uploadTrace: () => new TextEncoder().encode('time [s],speed [rpm]\n0,1\n')
};

let counted = 0;
const code = (prefix: string) => `${prefix}${++counted}`;

/** What an id in a path names. */
function idFor(path: string, things: Things): string {
	const kind = path.split('/')[1]!;
	const kinds: Record<string, string> = {
		clients: things.client,
		people: things.person,
		cells: lab.cell,
		fuels: lab.fuel,
		closures: lab.closure,
		engines: things.engine,
		builds: things.build,
		'fuel-batches': things.batch,
		'limit-sets': things.limitSet,
		bookings: things.booking,
		runs: things.run,
		attachments: things.runAttachment
	};
	const id = kinds[kind];
	if (!id) throw new Error(`tests/integration/access: say what {id} is in ${path}`);
	return id;
}

/** Things of the lab's that no client owns: nothing is foreign there. */
const LAB_OWNED = new Set(['cells', 'closures', 'fuels']);

/** Their bodies speak of the one who asks, and name nothing that could be another's. */
const OF_ONESELF = new Set(['changeMe', 'changePassword']);

const fill = (path: string, id: string, part: string) =>
	path.replace('{id}', id).replace(/\{(trace|attachment)Id\}/, part);
/** What stands under a thing in a path: one of its attachments, else its trace. */
function partOf({ path }: Operation, things: Things): string {
	if (!path.includes('{attachmentId}')) return things.trace;
	if (path.startsWith('/builds/')) return things.buildAttachment;
	return path.startsWith('/fuel-batches/') ? things.batchAttachment : things.runAttachment;
}
const bodyOf = ({ described }: Operation, things: Things) => {
	if (!described.requestBody) return undefined;
	const body = BODIES[described.operationId];
	if (!body) throw new Error(`tests/integration/access: tell a right body for ${described.operationId}`);
	return body(things);
};
const QUERIES: Record<string, string> = {
	readTrend: '?metric=peak_power',
	runsTouchedByTorqueChain: '?validFrom=2026-01-01T00:00:00Z'
};
const queryOf = ({ described }: Operation) => QUERIES[described.operationId] ?? '';
/** They answer an unknown filter with nothing found, and say so: an address that someone kept is no fault. */
const FORGIVING = new Set(['listRuns', 'readTrend']);

beforeAll(async () => {
	lab = await makeAccessLab(stack.current);
	const answer = await lab.call(null, 'GET', '/openapi.json');
	const document = JSON.parse(answer.text) as { paths: Record<string, Record<string, Described>> };
	operations = Object.entries(document.paths).flatMap(([path, methods]) =>
		Object.entries(methods).map(([method, described]) => ({ method: method.toUpperCase(), path, described }))
	);
});

describe('every operation of the API', () => {
	it('is described, and the matrix is not empty', () => {
		expect(operations.length).toBeGreaterThan(35);
		expect(new Set(operations.map(({ described }) => described.operationId)).size).toBe(operations.length);
	});

	it('answers 401 to nobody and to an unknown token', async () => {
		for (const operation of operations)
			for (const token of [null, `trn.${ABSENT}.x`]) {
				const answer = await lab.call(
					token,
					operation.method,
					fill(operation.path, ABSENT, ABSENT),
					bodyOf(operation, lab.own)
				);
				expect(answer.status, `${operation.method} ${operation.path}`).toBe(401);
			}
	});

	it('answers 403 to roles that never may, whatever the id', async () => {
		let asked = 0;
		for (const operation of operations)
			for (const role of ROLES.filter((each) => !operation.described['x-roles'].includes(each))) {
				const answers = [];
				for (const [id, trace] of [
					[idOr(operation.path, lab.own), partOf(operation, lab.own)],
					[idOr(operation.path, lab.foreign), partOf(operation, lab.foreign)],
					[ABSENT, ABSENT]
				] as const) {
					const answer = await lab.call(
						lab.tokens[role],
						operation.method,
						fill(operation.path, id, trace) + queryOf(operation),
						bodyOf(operation, lab.own)
					);
					expect(answer.status, `${role} ${operation.method} ${operation.path}: ${answer.text}`).toBe(403);
					answers.push(blind(answer, id));
					asked++;
				}
				expect(new Set(answers).size, `${role} ${operation.method} ${operation.path}`).toBe(1);
			}
		expect(asked).toBeGreaterThan(150);
	});

	it('answers a client about a rival’s thing as about none: by id, in bodies and in questions', async () => {
		let compared = 0;
		for (const operation of operations.filter(({ described }) => described['x-roles'].includes('client'))) {
			const kind = operation.path.split('/')[1]!;
			const label = `${operation.method} ${operation.path}`;
			if (operation.path.includes('{id}') && !LAB_OWNED.has(kind)) {
				const id = idFor(operation.path, lab.foreign);
				const path = (ref: string, trace: string) => fill(operation.path, ref, trace) + queryOf(operation);
				const theirs = await lab.call(
					lab.own.token,
					operation.method,
					path(id, partOf(operation, lab.foreign)),
					bodyOf(operation, lab.own)
				);
				const absent = await lab.call(
					lab.own.token,
					operation.method,
					path(ABSENT, ABSENT),
					bodyOf(operation, lab.own)
				);
				expect(theirs.status, `${label}: ${theirs.text}`).toBe(404);
				expect(blind(theirs, id), label).toBe(blind(absent, ABSENT));
				compared++;
				if (operation.path.includes('{traceId}')) {
					// A rival's trace under one's own run is as absent as any.
					const mixed = await lab.call(
						lab.own.token,
						operation.method,
						path(lab.own.run, partOf(operation, lab.foreign)),
						bodyOf(operation, lab.own)
					);
					expect(mixed.status, `${label} with a rival’s trace`).toBe(404);
				}
			}
			const isOfOneself = OF_ONESELF.has(operation.described.operationId);
			if (operation.described.requestBody && !operation.path.includes('{id}') && !isOfOneself) {
				const theirs = await lab.call(
					lab.own.token,
					operation.method,
					operation.path,
					bodyOf(operation, lab.foreign)
				);
				const absent = await lab.call(
					lab.own.token,
					operation.method,
					operation.path,
					bodyOf(operation, nothings())
				);
				expect(theirs.status, `${label} naming a rival’s things: ${theirs.text}`).toBe(400);
				expect(blind(theirs, ...Object.values(lab.foreign)), label).toBe(blind(absent, ABSENT));
				compared++;
			}
			for (const parameter of operation.described.parameters.filter(({ name }) =>
				['client', 'engine', 'build'].includes(name)
			)) {
				const ref = lab.foreign[parameter.name as 'client' | 'engine' | 'build'];
				const ask = (value: string) => {
					const query = queryOf(operation);
					return lab.call(
						lab.own.token,
						'GET',
						`${operation.path}${query}${query ? '&' : '?'}${parameter.name}=${value}`
					);
				};
				const [theirs, absent] = [await ask(ref), await ask(ABSENT)];
				expect(theirs.status, `${label}?${parameter.name}`).toBe(
					FORGIVING.has(operation.described.operationId) ? 200 : 400
				);
				expect(blind(theirs, ref)).toBe(blind(absent, ABSENT));
				compared++;
			}
		}
		console.log(`access matrix: ${operations.length} operations, ${compared} foreign-against-absent pairs`);
		expect(compared).toBeGreaterThan(25);
	});

	it('tells a client nothing of a rival in any answer, by codes and numbers either', async () => {
		const reads = operations.filter(
			({ method, described }) => method === 'GET' && described['x-roles'].includes('client')
		);
		for (const operation of reads) {
			const paths = operation.path.includes('{id}')
				? [
						fill(operation.path, idFor(operation.path, lab.own), partOf(operation, lab.own)),
						fill(operation.path, `E-${CANARY}`, partOf(operation, lab.own))
					]
				: [operation.path];
			for (const path of paths) {
				const answer = await lab.call(lab.own.token, 'GET', path + queryOf(operation));
				expect(answer.text.replaceAll(`E-${CANARY}`, ''), path).not.toContain(CANARY);
				expect(answer.text, path).not.toContain('BB-R-');
				expect(answer.text, path).not.toContain('BB-B-');
			}
		}
	});

	it('serves everyone who may: own things to the client, all to staff, and absent ones as 404', async () => {
		// What ends a thing comes last, so that it stands for the others.
		const last = [
			'cancelBooking',
			'declineBooking',
			'confirmBooking',
			'removeClosure',
			'removeRunAttachment',
			'removeBuildAttachment',
			'removeFuelBatchAttachment',
			'acceptRun',
			'voidRun',
			'disablePerson',
			'enablePerson'
		];
		const ordered = [...operations].sort(
			(a, b) => last.indexOf(a.described.operationId) - last.indexOf(b.described.operationId)
		);
		for (const operation of ordered)
			for (const role of operation.described['x-roles']) {
				const label = `${role} ${operation.method} ${operation.path}`;
				const token = lab.tokens[role];
				const path = (id: string, trace: string) => fill(operation.path, id, trace) + queryOf(operation);
				if (operation.path.includes('{id}')) {
					const absent = await lab.call(
						token,
						operation.method,
						path(ABSENT, ABSENT),
						bodyOf(operation, lab.own)
					);
					expect(absent.status, `${label} absent: ${absent.text}`).toBe(404);
				}
				const answer = await lab.call(
					token,
					operation.method,
					path(idOr(operation.path, lab.own), partOf(operation, lab.own)),
					bodyOf(operation, lab.own)
				);
				// A booking that someone else asked for is theirs or a manager's to move: said as such, since staff see it.
				if (
					role === 'engineer' &&
					['moveBooking', 'cancelBooking'].includes(operation.described.operationId)
				) {
					expect(answer.text, label).toContain('someone else');
					continue;
				}
				// Taken, ended and clashing are answers about one's own things; refusals of access and faults are not.
				expect(
					[200, 201, 202, 204, 409],
					`${label}: ${answer.status} ${answer.text.slice(0, 300)}`
				).toContain(
					operation.described.operationId === 'removeClosure' && answer.status === 404 ? 204 : answer.status
				);
			}
	});
});

function idOr(path: string, things: Things): string {
	return path.includes('{id}') ? idFor(path, things) : ABSENT;
}

function nothings(): Things {
	return Object.fromEntries(Object.keys(lab.own).map((key) => [key, ABSENT])) as unknown as Things;
}
