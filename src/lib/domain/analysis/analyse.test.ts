import { describe, expect, it } from 'vitest';
import type { ColumnMap, RunContext } from '../model';
import { analyseFile, describeFile, type AnalysedFile } from '.';

const bytes = (text: string) => new TextEncoder().encode(text);

const context = (changes: Partial<RunContext> = {}): RunContext => ({
	kind: 'power_sweep',
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
	fuel: { lhvMjKg: { value: 42.7 }, afrStoich: { value: 14.5 } },
	ambient: { barometerKpa: 98, temperatureC: 25, humidityPct: 40 },
	correction: 'none',
	settings: {},
	rules: [],
	...changes
});

const analyse = (text: string, changes: Partial<RunContext> = {}) =>
	analyseFile(bytes(text), context(changes), { name: 'trace.csv' });

function readyOf(analysed: AnalysedFile) {
	if (analysed.state !== 'ready') throw new Error(`${analysed.state}: ${analysed.error}`);
	return analysed;
}

const speedAt = (i: number) => 2000 + 4 * i;
const torqueAt = (i: number) => 150 - 1e-5 * (speedAt(i) - 4000) ** 2;
/** 1000 rows at 50 Hz: a ramp of 200 rev/min per s. */
function sweep(header: string, cells: (i: number) => readonly (number | string)[]): string {
	return [header, ...Array.from({ length: 1000 }, (_, i) => cells(i).join(','))].join('\n');
}
const HEADER = 'time [s],speed [rpm],torque [Nm]';
const three = (i: number) => [(i * 0.02).toFixed(2), speedAt(i), torqueAt(i).toFixed(3)];

describe('what is not certain is asked', () => {
	it.each([
		[
			'a speed without a unit',
			'time [s],speed,torque [Nm]',
			/“speed” may be speed \(The header gives no unit\)/
		],
		['a load in kilograms', 'time [s],speed [rpm],Load [kg]', /torque or power.*“Load \[kg\]”/]
	])('%s', (_, header, sentence) => {
		const analysed = analyse(sweep(header, three));
		expect(analysed.state).toBe('needs_map');
		expect(analysed.state !== 'ready' && analysed.error).toMatch(sentence);
	});

	it('with a proposal that shows header, unit, guess and values', () => {
		const analysed = analyse(sweep('time [s],speed,torque [Nm]', three));
		expect(analysed.state === 'needs_map' && analysed.proposal[1]).toMatchObject({
			index: 1,
			header: 'speed',
			unit: null,
			guess: 'speed',
			ask: true,
			sample: [2000, 2004, 2008, 2012, 2016]
		});
	});

	const map: ColumnMap[] = [
		{ index: 0, channel: 'time', unit: 's' },
		{ index: 1, channel: 'speed', unit: 'rpm' },
		{ index: 2, channel: 'torque', unit: 'Nm' }
	];

	it('and is ready once a map answers', () => {
		const analysed = readyOf(analyse(sweep('time [s],speed,M1', three), { map }));
		expect(analysed.metrics['peak_torque']!.value).toBeCloseTo(150, 1);
		expect(analysed.channels[1]).toMatchObject({
			code: 'speed',
			header: 'speed',
			unit: 'rev/min',
			sourceUnit: 'rpm',
			confidence: 1
		});
	});

	it('an unsure column that no figure needs is kept under its own header, and said', () => {
		const analysed = readyOf(analyse(sweep(`${HEADER},T1 [degC]`, (i) => [...three(i), 20])));
		expect(analysed.channels.map(({ code }) => code)).toContain('T1 [degC]');
		expect(analysed.findings.find(({ code }) => code === 'column_uncertain')?.message).toMatch(
			/“T1 \[degC\]” is kept under its own header/
		);
	});

	it.each([
		['an unknown unit', [map[0]!, map[1]!, { ...map[2]!, unit: 'stone' }], /“stone”/],
		['an unknown channel', [map[0]!, { ...map[1]!, channel: 'rpm' }, map[2]!], /“rpm”/],
		[
			'two columns for one channel',
			[map[0]!, map[1]!, { ...map[2]!, channel: 'speed', unit: 'rpm' }],
			/two columns/
		],
		['an index that is not there', [...map, { index: 7, channel: 'fuel_flow', unit: 'kg/h' }], /index 7/],
		['no column for what is needed', [map[0]!, map[1]!], /names no column as torque or power/]
	])('a wrong map asks again and names the fault: %s', (_, wrong, sentence) => {
		const analysed = analyse(sweep(HEADER, three), { map: wrong });
		expect(analysed.state).toBe('needs_map');
		expect(analysed.state !== 'ready' && analysed.error).toMatch(sentence);
	});
});

describe('pressures', () => {
	const text = sweep(`${HEADER},MAP [bar]`, (i) => [...three(i), (0.5 + i / 5000).toFixed(4)]);
	const map = (reference: 'gauge' | 'absolute'): ColumnMap[] => [
		{ index: 0, channel: 'time', unit: 's' },
		{ index: 1, channel: 'speed', unit: 'rpm' },
		{ index: 2, channel: 'torque', unit: 'Nm' },
		{ index: 3, channel: 'manifold_pressure', unit: 'bar', reference }
	];
	it('a gauge pressure is made absolute by the run’s barometer', () => {
		const gauge = readyOf(analyse(text, { map: map('gauge') })).metrics['manifold_pressure_max']!.value;
		const absolute = readyOf(analyse(text, { map: map('absolute') })).metrics['manifold_pressure_max']!.value;
		expect(gauge - absolute).toBeCloseTo(98, 6);
	});
	it('without a barometer it is kept as recorded under its own header, with a warning', () => {
		const analysed = readyOf(analyse(text, { map: map('gauge'), ambient: {} }));
		expect(analysed.metrics['manifold_pressure_max']).toBeUndefined();
		expect(analysed.findings.find(({ code }) => code === 'barometer_missing')?.severity).toBe('warning');
	});
	it('a barometer channel beats the entry', () => {
		const both = sweep(`${HEADER},MAP [bar],barometer [kPa]`, (i) => [...three(i), (0.5).toFixed(2), 100]);
		const analysed = readyOf(
			analyse(both, { map: [...map('gauge'), { index: 4, channel: 'barometer', unit: 'kPa' }] })
		);
		expect(analysed.metrics['manifold_pressure_max']!.value).toBeCloseTo(150, 6);
	});
});

describe('checks between channels', () => {
	const codes = (text: string, changes: Partial<RunContext> = {}) =>
		readyOf(analyse(text, changes)).findings.map(({ code }) => code);
	const power = (i: number) => (2 * Math.PI * speedAt(i) * torqueAt(i)) / 60_000;
	const fuel = (i: number) => ((power(i) / 0.33 / 42.7) * 3.6).toFixed(4);

	it('recorded power against 2πNT', () => {
		const header = `${HEADER},power [kW]`;
		expect(codes(sweep(header, (i) => [...three(i), (1.005 * power(i)).toFixed(4)]))).not.toContain(
			'power_disagrees'
		);
		expect(codes(sweep(header, (i) => [...three(i), (1.03 * power(i)).toFixed(4)]))).toContain(
			'power_disagrees'
		);
	});
	it('torque from power where only power was recorded', () => {
		const analysed = readyOf(
			analyse(
				sweep('time [s],speed [rpm],power [kW]', (i) => [
					(i * 0.02).toFixed(2),
					speedAt(i),
					power(i).toFixed(4)
				])
			)
		);
		expect(analysed.metrics['peak_torque']!.value).toBeCloseTo(150, 1);
	});
	it('fuel at zero under load', () =>
		expect(
			codes(sweep(`${HEADER},fuel flow [kg/h]`, (i) => [...three(i), i > 500 && i < 560 ? 0 : fuel(i)]))
		).toContain('fuel_not_positive'));
	it('an efficiency that is high but could be', () =>
		expect(
			codes(sweep(`${HEADER},fuel flow [kg/h]`, (i) => [...three(i), (0.55 * Number(fuel(i))).toFixed(4)]))
		).toContain('bte_suspect'));
	it('an efficiency too low for full load names the unit that would do', () => {
		const analysed = readyOf(
			analyse(
				sweep(`${HEADER},fuel flow [kg/h]`, (i) => [...three(i), (Number(fuel(i)) / 0.45359237).toFixed(4)])
			)
		);
		expect(analysed.findings.find(({ code }) => code === 'bte_implausible')?.message).toMatch(
			/in lb\/h instead of kg\/h/
		);
	});
	it('values that cannot be', () =>
		expect(
			codes(sweep(`${HEADER},coolant [degC]`, (i) => [...three(i), i > 100 && i < 110 ? 900 : 88]))
		).toContain('outside_possible'));
	it('a throttle channel chooses the full-load samples', () => {
		const text = sweep(`${HEADER},throttle [%]`, (i) => {
			const open = i % 100 < 50;
			return [
				(i * 0.02).toFixed(2),
				speedAt(i),
				(torqueAt(i) * (open ? 1 : 0.5)).toFixed(3),
				open ? 100 : 40
			];
		});
		expect(readyOf(analyse(text)).metrics['peak_torque']!.value).toBeCloseTo(150, 0);
	});
	it('fuel by volume through the batch’s density at the fuel’s temperature', () => {
		const text = sweep(`${HEADER},fuel flow [L/h]`, (i) => [
			...three(i),
			((1000 * Number(fuel(i))) / 745).toFixed(5)
		]);
		const analysed = readyOf(
			analyse(text, { fuel: { lhvMjKg: { value: 42.7 }, densityKgM3: { value: 745 } } })
		);
		expect(analysed.metrics['bte_max']!.value).toBeCloseTo(0.33, 3);
		expect(analysed.findings.map(({ code }) => code)).toContain('fuel_temperature_assumed');
	});
	it('lambda from the fuel’s composition where the batch states no stoichiometric ratio', () => {
		const text = sweep(`${HEADER},fuel flow [kg/h],air flow [kg/h]`, (i) => [
			...three(i),
			fuel(i),
			(14.577 * Number(fuel(i))).toFixed(4)
		]);
		const composed = readyOf(analyse(text, { fuel: { hydrogenCarbonRatio: { value: 1.85 } } }));
		expect(composed.metrics['lambda_flow_at_peak_power']!.value).toBeCloseTo(1, 3);
		const unknown = readyOf(analyse(text, { fuel: {} }));
		expect(unknown.metrics['lambda_flow_at_peak_power']).toBeUndefined();
		expect(unknown.findings.map(({ code }) => code)).toEqual(
			expect.arrayContaining(['heating_value_missing', 'stoichiometry_missing'])
		);
	});
});

describe('other kinds', () => {
	const table = 'speed [rpm],torque [Nm],fuel flow [kg/h]\n1200,100,4.2\n1500,140,7\n1800,120,7.4\n';

	it('a table of points: every row a point, figures by row', () => {
		const analysed = readyOf(analyse(table, { kind: 'point_table' }));
		expect(analysed.points.map(({ speed, n }) => [speed, n])).toEqual([
			[1200, 1],
			[1500, 1],
			[1800, 1]
		]);
		expect(analysed.metrics['peak_torque']).toMatchObject({ value: 140, at: { speed: 1500, torque: 140 } });
		expect(analysed.points[0]!['bte']).toBeCloseTo(
			(2 * Math.PI * 1200 * 100) / 60_000 / ((4.2 * 42.7) / 3.6),
			9
		);
		expect(analysed.sampleRateHz).toBeNull();
	});

	it('one bad reading among points is told as such, not as a wrong unit', () => {
		const rows = Array.from(
			{ length: 10 },
			(_, i) => `${1200 + 100 * i},100,${i === 4 ? 1.5 : (4.3 * (12 + i)) / 12}`
		);
		const analysed = readyOf(
			analyse(['speed [rpm],torque [Nm],fuel flow [kg/h]', ...rows].join('\n'), { kind: 'point_table' })
		);
		expect(analysed.findings.find(({ code }) => code === 'bte_implausible')?.message).toMatch(
			/in 1 of 10 points.*bad reading/
		);
	});

	it('a time column orders nothing in a table of points, and loses no row', () => {
		const timed = 'Time,speed [rpm],torque [Nm]\n14:40:00,1200,100\n09:15:00,1500,140\n,1800,120\n';
		const analysed = readyOf(analyse(timed, { kind: 'point_table' }));
		expect(analysed.points.map(({ speed }) => speed)).toEqual([1200, 1500, 1800]);
		expect(analysed.sampleRateHz).toBeNull();
	});

	it.each(['motoring', 'endurance'] as const)('%s is read as a log, and says so', (kind) => {
		const analysed = readyOf(analyse(sweep(HEADER, three), { kind }));
		expect(analysed.findings.map(({ code }) => code)).toContain('kind_not_reduced');
		expect(analysed.metrics['duration']!.value).toBeCloseTo(19.98, 6);
	});

	it('a log has ratios of integrals', () => {
		const analysed = readyOf(
			analyse(
				sweep('time [s],speed [rpm],torque [Nm],fuel flow [kg/h]', (i) => [
					(i * 0.02).toFixed(2),
					3000,
					i < 500 ? 100 : 0,
					i < 500 ? 6 : 1
				]),
				{
					kind: 'free_log'
				}
			)
		);
		const work = (31.41592653589793 * 9.99) / 1000;
		const energy = ((6 * 9.99 + 1 * 9.99) / 3600) * 42.7;
		expect(analysed.metrics['work_done']!.value).toBeCloseTo(work, 4);
		expect(analysed.metrics['bte_cycle']!.value).toBeCloseTo(work / energy, 3);
	});

	it('a steady run without a steady point says what would be one', () =>
		expect(
			readyOf(analyse(sweep(HEADER, three), { kind: 'steady_points' })).findings.find(
				({ code }) => code === 'no_points'
			)?.message
		).toMatch(/±1 %.*±2 %/));
});

it('the same file and context give the same answer', () => {
	const text = sweep(HEADER, three);
	expect(analyse(text)).toEqual(analyse(text));
});

describe('describeFile', () => {
	it('shows what the import will read', () => {
		const described = describeFile(bytes('Bench 3\n\nTime;Speed\ns;1/min\n0,0;900,5\n0,1;901,5\n'));
		expect(described).toEqual({
			ok: true,
			preamble: ['Bench 3'],
			headers: ['Time', 'Speed'],
			units: ['s', '1/min'],
			rows: [
				['0,0', '900,5'],
				['0,1', '901,5']
			],
			delimiter: ';',
			decimal: ','
		});
	});
	it('shows no more than 20 rows', () => {
		const described = describeFile(bytes(sweep(HEADER, three)));
		expect(described.ok && described.rows).toHaveLength(20);
	});
	it('gives the refusal that the import would give', () =>
		expect(describeFile(bytes('<html></html>'))).toMatchObject({
			ok: false,
			error: expect.stringMatching(/web page/) as string
		}));
});

describe('torque weighed behind a gear', () => {
	const geared = (torqueAt: 'flange' | 'stator') =>
		readyOf(
			analyse(sweep(HEADER, three), {
				cell: {
					torqueAt,
					rotorInertiaKgM2: null,
					shaftInertiaKgM2: null,
					gear: { ratio: 2, efficiency: 0.96 }
				}
			})
		);
	const plain = readyOf(analyse(sweep(HEADER, three)));
	const peak = (of: { metrics: Record<string, { value: number }> }) => of.metrics.peak_power!.value;

	it('stands at the engine in figures and trace, is said, and is kept as recorded beside', () => {
		const found = geared('stator');
		expect(peak(found)).toBeCloseTo(peak(plain) / (2 * 0.96), 9);
		expect(found.findings.find(({ code }) => code === 'torque_through_gear')?.message).toMatch(
			/ratio 2 and efficiency 0\.96/
		);
		const recorded = found.trace.columns.find(({ code }) => code.endsWith('(as recorded)'));
		expect(recorded?.values[0]).toBeCloseTo(torqueAt(0), 3);
	});
	it('is left as it is where a flange weighs it before the gear', () => {
		const found = geared('flange');
		expect(peak(found)).toBe(peak(plain));
		expect(found.findings.map(({ code }) => code)).not.toContain('torque_through_gear');
	});
});
