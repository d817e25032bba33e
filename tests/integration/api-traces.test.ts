import { setTimeout as sleep } from 'node:timers/promises';
import { beforeAll, describe, expect, it } from 'vitest';
import { addPerson, createTokenFor } from '../../src/lib/server/auth';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import type { RunDetail } from '../../src/lib/server/runs';
import { useStack } from '../setup/stack';
import { bytesOf, CORRECTION_FACTORS, tolerance, truthOf, type Truth } from '../traces/traces';

/**
 * Every invented trace through the API alone, with a token: upload, worker, figures, against the truth that the trace was
 * made from (invented data: it checks the product, not the formulas; those are checked in tests/reference).
 */
const stack = useStack();
let token = '';

const BROKEN = ['binary', 'empty', 'header-only', 'no-time', 'page', 'text-in-numbers'].map(
	(what) => `broken-${what}.csv`
);

async function call<T>(method: string, path: string, body?: unknown): Promise<T> {
	const bytes = body instanceof Uint8Array;
	const response = await fetch(`${stack.current.origin}/api/v1${path}`, {
		method,
		headers: {
			authorization: `Bearer ${token}`,
			...(body && !bytes ? { 'content-type': 'application/json' } : {})
		},
		...(body ? { body: bytes ? (body as BodyInit) : JSON.stringify(body) } : {})
	});
	const text = await response.text();
	if (!response.ok) throw new Error(`${method} ${path}: ${response.status} ${text}`);
	return JSON.parse(text) as T;
}

let made = 0;
/** A run of an engine and fuel as the trace's truth tells them, with the file uploaded and its figures there. */
async function runOf(file: string, told: Truth, correction: string, limitSet?: string): Promise<RunDetail> {
	const n = ++made;
	const compression = /latin1|steady/.test(file);
	const engine = await call<{ id: string }>('POST', '/engines', {
		client: 'TT',
		code: `E${n}`,
		name: file,
		displacementL: told.engine.displacement_l,
		cylinders: 4,
		strokesPerCycle: told.engine.rev_per_cycle * 2,
		ignition: compression ? 'compression' : 'spark',
		...(compression ? { induction: 'turbo_cooled' } : {}),
		inertiaKgM2: told.engine.inertia_kgm2
	});
	await call('POST', '/builds', { engine: engine.id, number: `B${n}`, title: file });
	await call('POST', '/fuel-batches', {
		fuel: 'F1',
		code: `Q${n}`,
		lhvMjKg: told.engine.lhv_mj_per_kg,
		afrStoich: told.engine.afr_stoich
	});
	const run = await call<RunDetail>('POST', '/runs', {
		build: `B${n}`,
		cell: 'C1',
		fuelBatch: `Q${n}`,
		kind: told.kind.replace(' ', '_'),
		startedAt: '2026-03-14T13:40:00+01:00',
		correction,
		limitSet,
		ambient: {
			barometerKpa: told.ambient.barometer_kpa,
			temperatureC: told.ambient.ambient_temp_degc,
			humidityPct: told.ambient.humidity_pct
		}
	});
	const bytes = bytesOf(file);
	const sent = await call<{ id: string; state: string }>(
		'POST',
		`/runs/${run.id}/traces?filename=${file}`,
		bytes
	);
	expect(sent.state).toBe('received');
	for (const until = Date.now() + 60_000; Date.now() < until; await sleep(50)) {
		const now = await call<RunDetail>('GET', `/runs/${run.number}`);
		if (!['received', 'processing'].includes(now.traces[0]!.state)) return now;
	}
	throw new Error(`${file} had no figures within a minute`);
}

beforeAll(async () => {
	const deps = openDeps(readConfig({ ...process.env, ...stack.current.env }), 1);
	await addPerson(deps, {
		email: 'manager@lab.example',
		name: 'M',
		role: 'manager',
		password: 'a sentence nobody guesses'
	});
	token = await createTokenFor(deps, 'manager@lab.example', 'traces');
	await closeDeps(deps);
	await call('POST', '/clients', { code: 'TT', name: 'Traces' });
	const absorber = { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 800, maxSpeedRpm: 13_000 };
	await call('POST', '/cells', { code: 'C1', name: 'Cell', absorber });
	await call('POST', '/fuels', { code: 'F1', name: 'Fuel' });
});

const WITH_METRICS = [
	'sweep-plain.csv',
	'sweep-semicolon-latin1.csv',
	'sweep-us-units.csv',
	'sweep-utf16-clock.txt',
	'sweep-dirty.csv',
	'energy-flow-limit.csv',
	'electrical.csv'
];

describe('figures through the API', () => {
	it.each(WITH_METRICS)('%s', async (file) => {
		const told = truthOf(file);
		const asked = Object.keys(told.metrics!).filter((metric) => metric in CORRECTION_FACTORS);
		let compared = 0;
		for (const correction of asked.length ? asked.map((metric) => CORRECTION_FACTORS[metric]!) : ['none']) {
			const run = await runOf(file, told, correction);
			expect(run.traces[0]).toMatchObject({ state: 'ready', error: null, filename: file });
			for (const [metric, value] of Object.entries(told.metrics!)) {
				if (metric in CORRECTION_FACTORS && CORRECTION_FACTORS[metric] !== correction) continue;
				const found = run.metrics[metric in CORRECTION_FACTORS ? 'correction_factor' : metric]?.value;
				expect(found, `${file} ${metric}`).toBeDefined();
				expect(Math.abs(found! - value), `${file} ${metric}: ${found} for ${value}`).toBeLessThanOrEqual(
					tolerance(metric, value)
				);
				compared++;
			}
			if (correction !== 'none') {
				const { correction_factor: factor, peak_power: power, peak_power_corrected: corrected } = run.metrics;
				expect(corrected!.value / (power!.value * factor!.value)).toBeCloseTo(1, 3);
			}
		}
		expect(compared).toBeGreaterThan(0);
	});

	it('every point of steady-points.csv, in order', async () => {
		const told = truthOf('steady-points.csv');
		const run = await runOf('steady-points.csv', told, 'none');
		expect(run.points).toHaveLength(told.points!.length);
		told.points!.forEach((point, index) => {
			const found = run.points[index]!;
			for (const [code, key] of [
				['torque', 'torque'],
				['power', 'power'],
				['fuel_flow', 'fuel'],
				['air_flow', 'air'],
				['bsfc', 'bsfc']
			] as const)
				expect(Math.abs(found[code]! / point[key]! - 1), `point ${index} ${code}`).toBeLessThan(
					code === 'bsfc' ? 0.007 : 0.005
				);
			expect(Math.abs(found.bte! - point.bte!)).toBeLessThan(0.004);
			expect(found.n).toBeGreaterThanOrEqual(300);
		});
	});
});

describe('limits, findings and refusals through the API', () => {
	it('flags exactly the two spans of energy-flow-limit.csv, and mails those who follow the build', async () => {
		const told = truthOf('energy-flow-limit.csv');
		await call('POST', '/limit-sets', {
			code: 'L1',
			title: 'Energy flow',
			rules: [
				{
					title: 'Fuel energy flow over speed',
					subject: { channel: 'fuel_energy_flow' },
					relation: 'at_most',
					limit: { over: 'speed', table: told.limit!.table },
					holdS: told.limit!.hold_s,
					severity: 'review'
				}
			]
		});
		const run = await runOf('energy-flow-limit.csv', told, 'none', 'L1');
		expect(run.flags).toHaveLength(1);
		const spans = run.flags[0]!.spans;
		expect(spans).toHaveLength(2);
		told.expected_spans_s!.forEach(([from, to], index) => {
			expect(Math.abs(spans[index]![0] - from)).toBeLessThanOrEqual(0.1);
			expect(Math.abs(spans[index]![1] - to)).toBeLessThanOrEqual(0.1);
		});
		expect((run.flags[0]!.worst!.ratio! - 1) * 100).toBeCloseTo(told.worst_over_limit_pct!, 1);
		for (const until = Date.now() + 20_000; ; await sleep(100)) {
			const mail = (await stack.current.mails()).find((each) => each.subject.includes(run.number));
			if (mail) {
				// Whoever made the build follows it.
				expect(mail.to).toEqual(['manager@lab.example']);
				expect(mail.text).toContain('Fuel energy flow over speed');
				expect(mail.text).toContain(`/runs/${run.number}`);
				break;
			}
			if (Date.now() > until) throw new Error('no mail about the flagged run within 20 s');
		}
	});

	it('finds the two faults of wrong-unit.csv, and still gives its figures', async () => {
		const run = await runOf('wrong-unit.csv', truthOf('wrong-unit.csv'), 'none');
		const warnings = run.traces[0]!.findings.filter((finding) => finding.severity !== 'info');
		expect(warnings.map((finding) => finding.code).sort()).toEqual(['bte_implausible', 'lambda_disagrees']);
		expect(warnings.find((finding) => finding.code === 'bte_implausible')!.message).toContain('kg/h');
		expect(run.traces[0]!.state).toBe('ready');
	});

	it('finds every fault of sweep-dirty.csv', async () => {
		const run = await runOf('sweep-dirty.csv', truthOf('sweep-dirty.csv'), 'none');
		const codes = run.traces[0]!.findings.map((finding) => finding.code);
		for (const code of ['gap', 'repeated_stamp', 'spike', 'stuck', 'missing_marks', 'cut_row'])
			expect(codes).toContain(code);
	});

	it.each(BROKEN)('refuses %s with a sentence and keeps the original', async (file) => {
		const run = await runOf(file, truthOf('sweep-plain.csv'), 'none');
		const trace = run.traces[0]!;
		expect(trace.state).toBe('refused');
		expect(trace.error!.length).toBeGreaterThan(40);
		expect(run.metrics).toEqual({});
		expect(run.flags).toEqual([]);
		expect(run.state).toBe('open');
		const original = await fetch(
			`${stack.current.origin}/api/v1/runs/${run.id}/traces/${trace.id}/original`,
			{
				headers: { authorization: `Bearer ${token}` }
			}
		);
		expect(Buffer.from(await original.arrayBuffer()).equals(bytesOf(file))).toBe(true);
		expect(original.headers.get('content-disposition')).toContain('attachment');
		expect(original.headers.get('content-security-policy')).toContain('sandbox');
	});

	it('answers a window whose extremes lose no sample, as JSON and as bytes alike', async () => {
		const run = await runOf('sweep-plain.csv', truthOf('sweep-plain.csv'), 'none');
		const rows = new TextDecoder()
			.decode(bytesOf('sweep-plain.csv'))
			.trim()
			.split('\n')
			.slice(1)
			.map((line) => line.split(',').map(Number));
		const torque = rows.filter((row) => row[0]! >= 10 && row[0]! <= 30).map((row) => row[2]!);
		const path = `/runs/${run.id}/trace?channels=torque&from=10&to=30&points=20`;
		const window = await call<{ time: number[]; channels: Record<string, { lo: number[]; hi: number[] }> }>(
			'GET',
			path
		);
		expect(window.time).toHaveLength(20);
		expect(Math.min(...window.channels.torque!.lo)).toBeCloseTo(Math.min(...torque), 3);
		expect(Math.max(...window.channels.torque!.hi)).toBeCloseTo(Math.max(...torque), 3);
		const { decodeWindow } = await import('../../src/lib/domain/trace');
		const bytes = await fetch(`${stack.current.origin}/api/v1${path}`, {
			headers: { authorization: `Bearer ${token}`, accept: 'application/octet-stream' }
		});
		const decoded = decodeWindow(new Uint8Array(await bytes.arrayBuffer()));
		expect(decoded.time).toEqual(window.time);
		expect(decoded.channels[0]!.hi).toEqual(window.channels.torque!.hi);
	});
});
