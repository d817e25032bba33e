import { describe, expect, it } from 'vitest';
import { analyseFile, type AnalysedFile } from '$lib/domain/analysis';
import type { FuelFacts, Rule, RunContext } from '$lib/domain/model';
import { NewLimitSet } from '../limits';
import { DEMO_BOOKINGS } from './lab/bookings';
import { DEMO_CELLS, TORQUE_READS } from './lab/cells';
import { modelOf } from './lab/engines';
import { HAPPENINGS } from './lab/events';
import { DEMO_BATCHES } from './lab/fuels';
import { DEMO_LIMIT_SETS } from './lab/limits';
import type { DemoRun } from './lab/run';
import { DEMO_RECORDS, DEMO_RUNS } from './lab/runs';
import { sweepTruth } from './rig';
import { engineOf, runFile } from './run-file';

function contextOf(run: DemoRun): RunContext {
	const engine = engineOf(run);
	const cell = DEMO_CELLS.find(({ code }) => code === run.cell)!;
	const {
		fuel: _fuel,
		code: _code,
		client: _client,
		...properties
	} = DEMO_BATCHES.find(({ code }) => code === run.batch)!;
	const limits = NewLimitSet.parse(DEMO_LIMIT_SETS.find(({ code }) => code === run.limitSet));
	return {
		kind: run.kind,
		engine: {
			displacementL: engine.model.displacementL,
			cylinders: engine.cylinders,
			strokesPerCycle: engine.model.strokesPerCycle,
			ignition: engine.model.ignition,
			induction: engine.induction,
			inertiaKgM2: engine.inertiaKgM2,
			maxSpeedRpm: engine.model.maxSpeedRpm,
			expectedTorque: engine.expectedTorque
		},
		cell: {
			torqueAt: cell.torqueAt ?? 'flange',
			rotorInertiaKgM2: cell.rotorInertiaKgM2 ?? null,
			shaftInertiaKgM2: cell.shaftInertiaKgM2 ?? null
		},
		fuel: properties as FuelFacts,
		ambient: run.air,
		correction: run.correction,
		settings: {},
		rules: limits.rules as Rule[]
	};
}

const analysed = new Map<string, AnalysedFile>();
function analyse(run: DemoRun): AnalysedFile {
	const done =
		analysed.get(run.filename) ?? analyseFile(runFile(run).bytes, contextOf(run), { name: run.filename });
	analysed.set(run.filename, done);
	return done;
}

function ready(run: DemoRun) {
	const answer = analyse(run);
	if (answer.state !== 'ready') throw new Error(`${run.filename} is ${answer.state}: ${answer.error}`);
	return answer;
}

const ofTest = (...kinds: DemoRun['test']['is'][]) =>
	DEMO_RUNS.filter(({ trace, test }) => trace === 'ready' && kinds.includes(test.is));

describe('the files of the demo runs', () => {
	it('are the same bytes at every call', () => {
		for (const one of DEMO_RUNS.slice(-3)) expect(runFile(one).bytes.equals(runFile(one).bytes)).toBe(true);
	});

	it.each(DEMO_RUNS)('$filename ends as $trace', (one) => {
		const answer = analyse(one);
		expect(answer.state, 'error' in answer ? answer.error : '').toBe(one.trace);
	});
});

describe.each(ofTest('sweep', 'capped'))('the sweep $filename', (one) => {
	it('gives the figures of the model back within 1 %', () => {
		const { metrics } = ready(one);
		const { truth } = runFile(one);
		for (const [code, value] of Object.entries(truth)) {
			if (!(code in metrics)) continue;
			expect(
				Math.abs(metrics[code]!.value / value - 1),
				`${code}: ${metrics[code]!.value} for ${value}`
			).toBeLessThan(0.01);
		}
		for (const code of ['peak_power', 'peak_torque', 'bte_max', 'bsfc_min', 'fuel_flow_max'])
			expect(metrics).toHaveProperty(code);
	});

	it('raises no warning about itself', () => {
		const loud = ready(one).findings.filter(({ severity }) => severity !== 'info');
		expect(loud).toEqual([]);
	});
});

describe.each(ofTest('steady'))('the points $filename', (one) => {
	it('are all found, within 1 % of the model', () => {
		const { points } = ready(one);
		const truth = runFile(one).points;
		expect(points).toHaveLength(truth.length);
		for (const [k, expected] of truth.entries())
			for (const [code, value] of Object.entries(expected))
				expect(Math.abs(points[k]![code]! / value - 1), `point ${k} ${code}`).toBeLessThan(0.01);
	});
});

describe.each(ofTest('electrical'))('the electrical log $filename', (one) => {
	it('gives its energies back within 1 %', () => {
		const { metrics } = ready(one);
		for (const [code, value] of Object.entries(runFile(one).truth))
			expect(Math.abs(metrics[code]!.value / value - 1), code).toBeLessThan(0.01);
	});
});

describe('limits', () => {
	const judged = DEMO_RUNS.filter(({ trace }) => trace === 'ready');
	it.each(judged)('$filename crosses $crosses', (one) => {
		expect(ready(one).flags.map(({ rule }) => rule)).toHaveLength(one.crosses);
	});

	it.each(judged.filter(({ test, crosses }) => test.is === 'capped' && crosses > 0))(
		'$filename crosses its energy-flow line in its overshoots',
		(one) => {
			const [flag] = ready(one).flags;
			const expected = runFile(one).spans;
			expect(flag!.severity).toBe('breach');
			expect(flag!.spans).toHaveLength(expected.length);
			for (const [k, span] of expected.entries())
				for (const end of [0, 1] as const)
					expect(Math.abs(flag!.spans[k]![end] - span[end])).toBeLessThan(0.1);
		}
	);

	it.each(judged.filter(({ disturbances }) => disturbances))(
		'$filename crosses its limit while it is disturbed',
		(one) => {
			const [flag] = ready(one).flags;
			expect(flag!.spans).toHaveLength(one.disturbances!.length);
			for (const [k, { atS, lastsS }] of one.disturbances!.entries()) {
				const [from, to] = flag!.spans[k]!;
				expect(from).toBeGreaterThan(atS - 0.1);
				expect(to).toBeLessThan(atS + lastsS + 0.4);
			}
		}
	);
});

/** What is true of the lab, without the scatter between runs; the figures must lead back to it. */
describe('what is to be found', () => {
	const room = { barometerKpa: 100, temperatureC: 21, humidityPct: 45 };
	const best = (build: string, lhvMjKg: number, afrStoich: number) => {
		const engine = engineOf({ build });
		const bench = {
			engine: modelOf(engine, build),
			air: room,
			fuel: { lhvMjKg, afrStoich },
			inertiaKgM2: 0,
			torqueRangeNm: 1
		};
		return sweepTruth(bench, 1400, 4200)['bte_max']!;
	};
	it('is a build one point more efficient than its parent', () => {
		const points = 100 * (best('BV-16.B', 29.14, 9.9) - best('BV-16.A', 29.14, 9.9));
		expect(points).toBeCloseTo(1, 1);
	});

	it('is a cell that shows 1.5 % too much torque, and no other', () => {
		expect(TORQUE_READS).toEqual({ EC1: 1.015 });
	});

	it('is a batch whose certificate lies outside what was ordered, and no other', () => {
		const diesel = NewLimitSet.parse(DEMO_LIMIT_SETS.find(({ code }) => code === 'LAB-DIESEL'));
		const rule = diesel.rules.find(({ subject }) => 'fuel' in subject && subject.fuel === 'lhvMjKg')!;
		const low = DEMO_BATCHES.filter(
			({ fuel, lhvMjKg }) => fuel === 'DIESEL-B7' && lhvMjKg.value < (rule.limit as number)
		);
		expect(low.map(({ code }) => code)).toEqual(['B7-219']);
	});
});

describe('the plan of the demo lab', () => {
	it('has some sixty traces, and more runs without', () => {
		expect(DEMO_RUNS.length).toBeGreaterThanOrEqual(58);
		expect(DEMO_RUNS.length).toBeLessThanOrEqual(70);
		expect(DEMO_RECORDS.length).toBeGreaterThanOrEqual(50);
	});

	it('names every file once, and starts no two runs of a build together', () => {
		const names = DEMO_RUNS.map(({ filename }) => filename);
		expect(new Set(names).size).toBe(names.length);
		const starts = [...DEMO_RUNS, ...DEMO_RECORDS].map(
			(one) => `${one.build} ${JSON.stringify(one.started)}`
		);
		expect(new Set(starts).size).toBe(starts.length);
	});

	it('tells only of runs and slots that there are', () => {
		const names = DEMO_RUNS.map(({ filename }) => filename.replace('.csv', ''));
		for (const name of Object.keys(HAPPENINGS)) expect(names).toContain(name);
		const slots = DEMO_BOOKINGS.map(({ key }) => key);
		expect(new Set(slots).size).toBe(slots.length);
		for (const { booking } of [...DEMO_RUNS, ...DEMO_RECORDS])
			expect([undefined, ...slots]).toContain(booking);
	});

	it('lets nobody review what they logged', () => {
		for (const { loggedBy, outcome } of [...DEMO_RUNS, ...DEMO_RECORDS])
			if (outcome.state === 'accepted') expect(outcome.by).not.toBe(loggedBy);
	});
});
