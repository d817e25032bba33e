import { describe, expect, it } from 'vitest';
import { analyseFile, type AnalysedFile } from '$lib/domain/analysis';
import type { FuelFacts, Rule, RunContext } from '$lib/domain/model';
import { NewLimitSet } from '../limits';
import { DEMO_CELLS } from './lab/cells';
import { DEMO_BATCHES } from './lab/fuels';
import { DEMO_LIMIT_SETS } from './lab/limits';
import type { DemoRun } from './lab/run';
import { DEMO_RUNS } from './lab/runs';
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
const run = (filename: string) => DEMO_RUNS.find((one) => one.filename === filename)!;

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
	it('are crossed by the energy-flow run alone, in its two overshoots', () => {
		const energy = run('ts-14-1-energy-flow.csv');
		for (const one of DEMO_RUNS.filter(({ trace }) => trace === 'ready'))
			expect(ready(one).flags.length, one.filename).toBe(one === energy ? 1 : 0);
		const [flag] = ready(energy).flags;
		const expected = runFile(energy).spans;
		expect(flag!.severity).toBe('breach');
		expect(flag!.spans).toHaveLength(expected.length);
		for (const [k, span] of expected.entries())
			for (const end of [0, 1] as const) expect(Math.abs(flag!.spans[k]![end] - span[end])).toBeLessThan(0.1);
	});
});

describe('what is to be found', () => {
	it('build B of the generator engine is a point more efficient, by far more than its scatter', () => {
		const bte = (build: string) =>
			ofTest('sweep')
				.filter((one) => one.build === build)
				.map((one) => 100 * ready(one).metrics['bte_max']!.value);
		const [a, b] = [bte('BV-16.A'), bte('BV-16.B')];
		expect([a.length, b.length]).toEqual([2, 2]);
		const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
		expect(mean(b) - mean(a)).toBeGreaterThan(0.6);
		expect(mean(b) - mean(a)).toBeLessThan(1.5);
		expect(Math.min(...b)).toBeGreaterThan(Math.max(...a));
	});
});
