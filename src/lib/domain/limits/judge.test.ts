import { describe, expect, it } from 'vitest';
import type { Metrics, Rule, RunContext } from '../model';
import type { Trace, TraceColumn } from '../trace/trace';
import { judge, judgeFuel, tableValue } from './judge';

const column = (code: string, values: Float64Array, unit = '-'): TraceColumn => ({
	code,
	header: code,
	unit,
	sourceUnit: unit,
	confidence: 1,
	index: 0,
	values
});

/** 10 s at 10 Hz; torque is 100 with what the test puts on top. */
function traceOf(over: readonly (readonly [from: number, to: number, value: number])[], clock = true): Trace {
	const rows = 100;
	const torque = new Float64Array(rows).fill(100);
	for (const [from, to, value] of over) torque.fill(value, from, to);
	const speed = Float64Array.from({ length: rows }, (_, i) => 1000 + 10 * i);
	return {
		time: clock ? Float64Array.from({ length: rows }, (_, i) => i / 10) : null,
		columns: [column('torque', torque, 'N·m'), column('speed', speed, 'rev/min')],
		rowNumbers: new Uint32Array(rows),
		rows
	};
}

const rule = (changes: Partial<Rule> = {}): Rule => ({
	title: 'Torque limit',
	subject: { channel: 'torque' },
	relation: 'at_most',
	limit: 150,
	holdS: 0,
	severity: 'review',
	...changes
});

const context = (rules: Rule[], fuel: RunContext['fuel'] = {}): RunContext => ({
	kind: 'free_log',
	engine: {
		displacementL: 2,
		cylinders: 4,
		strokesPerCycle: 4,
		ignition: 'spark',
		induction: null,
		inertiaKgM2: null,
		maxSpeedRpm: null,
		expectedTorque: null
	},
	cell: { torqueAt: 'flange', rotorInertiaKgM2: null, shaftInertiaKgM2: null },
	fuel,
	ambient: {},
	correction: 'none',
	settings: {},
	rules
});
const flagsOf = (trace: Trace, rules: Rule, metrics: Metrics = {}) =>
	judge(trace, metrics, context([rules])).flags;
const notJudged = (trace: Trace, rules: Rule, metrics: Metrics = {}, fuel: RunContext['fuel'] = {}) =>
	judge(trace, metrics, context([rules], fuel))
		.findings.map(({ message }) => message)
		.join();

describe('rules over samples', () => {
	it('a span goes from the first to the last sample over the limit', () => {
		const [flag] = flagsOf(traceOf([[20, 31, 180]]), rule());
		expect(flag).toMatchObject({
			rule: 'Torque limit',
			severity: 'review',
			spans: [[2, 3]],
			worst: { value: 180, limit: 150, unit: 'N·m', at: 2, ratio: 1.2 }
		});
		expect(flag!.totalS).toBeCloseTo(1, 9);
		expect(flag!.message).toBe(
			'Torque limit: torque was above its limit once for 1 s in all; worst 180 N·m against 150 (1.200 times) at 2.00 s.'
		);
	});
	it('what is at the limit is within it', () =>
		expect(flagsOf(traceOf([[20, 31, 150]]), rule())).toEqual([]));
	it('one sample is enough where nothing is to be held', () =>
		expect(flagsOf(traceOf([[20, 21, 151]]), rule())[0]!.spans).toEqual([[2, 2]]));
	it('a shorter span than the hold does not count; a sample lasts to the next', () => {
		expect(flagsOf(traceOf([[20, 24, 180]]), rule({ holdS: 0.5 }))).toEqual([]);
		expect(flagsOf(traceOf([[20, 25, 180]]), rule({ holdS: 0.5 }))).toHaveLength(1);
	});
	it('spans closer than the merge gap are one', () => {
		const trace = traceOf([
			[20, 25, 180],
			[28, 33, 190]
		]);
		expect(flagsOf(trace, rule())[0]!.spans).toHaveLength(2);
		const [merged] = flagsOf(trace, rule({ mergeGapS: 0.4 }));
		expect(merged!.spans).toEqual([[2, 3.2]]);
		expect(merged!.worst.value).toBe(190);
	});
	it('merges before it asks how long: two short spans may make one that counts', () => {
		const trace = traceOf([
			[20, 24, 180],
			[25, 29, 180]
		]);
		expect(flagsOf(trace, rule({ holdS: 0.8, mergeGapS: 0.25 }))).toHaveLength(1);
	});
	it('an unknown sample inside does not end a span, a hole in the record does', () => {
		const trace = traceOf([[20, 40, 180]]);
		trace.columns[0]!.values[30] = NaN;
		expect(flagsOf(trace, rule())[0]!.spans).toEqual([[2, 3.9]]);
		for (let i = 30; i < 100; i++) trace.time![i] = trace.time![i]! + 20;
		expect(flagsOf(trace, rule())[0]!.spans).toHaveLength(2);
	});
	it('a sparse channel is judged on its own samples', () => {
		const trace = traceOf([[20, 41, 180]]);
		trace.columns[0]!.values.forEach((_, i, values) => {
			if (i % 5 !== 0) values[i] = NaN;
		});
		expect(flagsOf(trace, rule({ holdS: 1 }))[0]!.spans).toEqual([[2, 4]]);
	});
	it('at_least and between', () => {
		expect(
			flagsOf(traceOf([[20, 31, 40]]), rule({ relation: 'at_least', limit: 50 }))[0]!.worst
		).toMatchObject({ value: 40, limit: 50, ratio: 0.8 });
		const trace = traceOf([
			[20, 31, 40],
			[50, 55, 400]
		]);
		const [flag] = flagsOf(trace, rule({ relation: 'between', limit: [50, 150] }));
		expect(flag!.spans).toHaveLength(2);
		expect(flag!.worst).toMatchObject({ value: 400, limit: 150 });
	});
	it('a table over another channel, held past its ends', () => {
		const limit = {
			over: 'speed',
			table: [
				[1200, 100],
				[1500, 160]
			] as [number, number][]
		};
		const [flag] = flagsOf(traceOf([[0, 100, 130]]), rule({ limit }));
		// 130 is reached where the table passes it: 1350 rev/min, row 35.
		expect(flag!.spans).toEqual([[0, 3.4]]);
		expect(flag!.worst).toMatchObject({ limit: 100, at: 0 });
	});
	it('an expression', () => {
		const [flag] = flagsOf(
			traceOf([[20, 31, 180]]),
			rule({ subject: { expression: 'torque * 2' }, limit: 300 })
		);
		expect(flag!.worst.value).toBe(360);
	});
	it('a limit of zero has no ratio', () =>
		expect(flagsOf(traceOf([[0, 100, 5]]), rule({ limit: 0 }))[0]!.worst.ratio).toBeNull());
	it('rows of a table of points have no spans', () => {
		const [flag] = flagsOf(traceOf([[20, 31, 180]], false), rule({ holdS: 5 }));
		expect(flag).toMatchObject({ spans: [], totalS: 0, worst: { value: 180, at: null } });
	});
});

describe('figures and fuel', () => {
	const metrics: Metrics = {
		peak_power: { value: 130, unit: 'kW', u: 0.4, at: { speed: 6500 }, method: 'local-fit.1' },
		peak_power_corrected: {
			value: 140,
			unit: 'kW',
			u: null,
			at: null,
			method: 'x.1',
			outsideRange: 'too hot'
		}
	};
	it('a figure over its limit', () => {
		const [flag] = flagsOf(
			traceOf([]),
			rule({ title: 'Power', subject: { metric: 'peak_power' }, limit: 120 }),
			metrics
		);
		expect(flag!.message).toMatch(/^Power: peak_power is 130 kW, above the limit of 120 \(1\.083 times\)/);
	});
	it('a figure against a table over the speed where it occurs', () => {
		const limit = {
			over: 'speed',
			table: [
				[0, 0],
				[7000, 140]
			] as [number, number][]
		};
		expect(flagsOf(traceOf([]), rule({ subject: { metric: 'peak_power' }, limit }), metrics)).toHaveLength(0);
		const lower = {
			over: 'speed',
			table: [
				[0, 0],
				[7000, 139]
			] as [number, number][]
		};
		expect(
			flagsOf(traceOf([]), rule({ subject: { metric: 'peak_power' }, limit: lower }), metrics)
		).toHaveLength(1);
	});
	it('a property of the fuel between two values', () => {
		const rules = rule({ subject: { fuel: 'ron' }, relation: 'between', limit: [95, 102] });
		expect(judge(traceOf([]), {}, context([rules], { ron: { value: 98 } })).flags).toEqual([]);
		expect(judge(traceOf([]), {}, context([rules], { ron: { value: 91 } })).flags[0]!.worst).toMatchObject({
			value: 91,
			limit: 95
		});
	});
	it('is kept from a figure outside its method’s range', () =>
		expect(notJudged(traceOf([]), rule({ subject: { metric: 'peak_power_corrected' } }), metrics)).toMatch(
			/outside its method/
		));
});

describe('what cannot be judged is said', () => {
	it.each([
		[
			rule({ subject: { channel: 'boost_pressure' } }),
			/“Torque limit” could not be judged: the trace has no channel boost_pressure/
		],
		[rule({ limit: { over: 'throttle', table: [[0, 1]] } }), /no channel throttle, over which/],
		[rule({ subject: { expression: 'torque *' } }), /cannot be read/],
		[rule({ subject: { expression: 'torqe * 2' } }), /no channel torqe/],
		[rule({ subject: { metric: 'bte_max' } }), /no figure bte_max/],
		[rule({ subject: { fuel: 'ron' } }), /states no “Research octane number”/],
		[rule({ limit: [1, 2] }), /does not go with “at_most”/],
		[rule({ relation: 'between' }), /does not go with “between”/],
		[rule({ limit: { over: 'speed', table: [] } }), /no known value/]
	])('%j', (rules, sentence) => expect(notJudged(traceOf([]), rules)).toMatch(sentence));
});

describe('tableValue', () => {
	const table = [
		[6000, 300],
		[0, 60]
	] as const;
	it.each([
		[-10, 60],
		[0, 60],
		[3000, 180],
		[6000, 300],
		[9000, 300]
	])('at %d', (x, y) => expect(tableValue(table, x)).toBeCloseTo(y, 9));
});

describe('a fuel batch by itself', () => {
	const octane = rule({ title: 'Octane', subject: { fuel: 'ron' }, relation: 'at_least', limit: 95 });
	it('crosses the rules that speak of it', () =>
		expect(judgeFuel([octane, rule()], { ron: { value: 93 } }).map(({ rule }) => rule)).toEqual(['Octane']));
	it('is told with the property’s name and unit, as people read them', () => {
		const density = rule({
			title: 'Density',
			subject: { fuel: 'densityKgM3' },
			relation: 'at_least',
			limit: 820
		});
		const [flag] = judgeFuel([density], { densityKgM3: { value: 745.8 } });
		expect(flag!.message).toContain('Density at 15 °C is 745.8 kg/m³');
		expect(flag!.message).not.toContain('densityKgM3');
		expect(flag!.worst.unit).toBe('kg/m³');
	});
	it('crosses none that it keeps, and none of what is not measured', () => {
		expect(judgeFuel([octane], { ron: { value: 95 } })).toEqual([]);
		expect(judgeFuel([octane], {})).toEqual([]);
	});
});
