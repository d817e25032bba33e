import { describe, expect, it } from 'vitest';
import {
	engineOf,
	figuresOf,
	PLAIN,
	record,
	seeded,
	sweepContext,
	write,
	type Engine,
	type Part,
	type Recording,
	type Writing
} from './synthetic';
import { metric, ready, tolerance, warnings, type Ready } from './traces';

const up = ({ loRpm, hiRpm }: Engine, seconds: number): Part => ({
	seconds,
	rpm: (share) => loRpm + (hiRpm - loRpm) * share,
	load: 1
});
const down = ({ loRpm, hiRpm }: Engine, seconds: number, load = 1): Part => ({
	seconds,
	rpm: (share) => hiRpm - (hiRpm - loRpm) * share,
	load
});
const hold = (rpm: number, seconds: number, load: number): Part => ({ seconds, rpm: () => rpm, load });

function expectFigures(analysed: Ready, engine: Engine, label: string): void {
	for (const [code, value] of Object.entries(figuresOf(engine)))
		expect(Math.abs(metric(analysed, code) - value), `${label}: ${code}`).toBeLessThanOrEqual(
			tolerance(code, value)
		);
}

const WRITINGS: Record<string, Writing> = {
	'plain commas': PLAIN,
	'semicolons, decimal commas, latin-1, unit row, preamble': {
		delimiter: ';',
		decimal: ',',
		encoding: 'latin1',
		headers: ['Zeit', 'Drehzahl', 'Drehmoment', 'Kraftstoff'],
		unitRow: ['s', '1/min', 'Nm', 'kg/h'],
		preamble: ['Prüfstand;3', 'Bemerkung;warm, 2. Lauf', '']
	},
	'UTF-16, tabs, a clock over midnight, g/s': {
		delimiter: '\t',
		decimal: '.',
		encoding: 'utf-16le',
		headers: ['Time', 'N_ENG [1/min]', 'M_DYN [N.m]', 'FUELRATE [g/s]'],
		scale: [1, 1, 1, 1 / 3.6],
		clock: true
	},
	'quoted US units': {
		...PLAIN,
		quoted: true,
		headers: ['Time (sec)', 'Engine Speed (RPM)', 'Torque (lb-ft)', 'Fuel Flow (lb/hr)'],
		scale: [1, 1, 1 / 1.3558179483314, 1 / 0.45359237]
	},
	'pipes and milliseconds': {
		...PLAIN,
		delimiter: '|',
		headers: ['t [ms]', 'rpm', 'torque [Nm]', 'fuel flow [kg/h]'],
		scale: [1000, 1, 1, 1]
	},
	'quoted decimal commas between commas': { ...PLAIN, decimal: ',' },
	'fuel in every fifth row only': { ...PLAIN, fuelEvery: 5 }
};

describe('a full-load ramp gives the engine’s own figures', () => {
	const seeds = Array.from({ length: 12 }, (_, k) => k + 1);
	describe.each(Object.entries(WRITINGS))('%s', (name, writing) => {
		it.each(seeds)('seed %d', (seed) => {
			const random = seeded(7919 * seed + name.length);
			const engine = engineOf(random);
			const recording: Recording = {
				rateHz: [50, 100, 200][Math.floor(3 * random())]!,
				noise: 0.003 + 0.007 * random()
			};
			const analysed = ready(
				write(record(engine, [up(engine, 20 + 30 * random())], recording, random), writing),
				sweepContext(),
				name
			);
			expectFigures(analysed, engine, `seed ${seed}`);
			expect(warnings(analysed)).toEqual([]);
		});
	});
});

describe('other shapes of a run', () => {
	const shape = (
		parts: (engine: Engine) => Part[],
		seed: number,
		recording: Partial<Recording> = {},
		writing: Partial<Writing> = {}
	) => {
		const random = seeded(seed);
		const engine = engineOf(random);
		const all = { rateHz: 50, noise: 0.004, ...recording };
		const bytes = write(record(engine, parts(engine), all, random), { ...PLAIN, ...writing });
		return { engine, bytes };
	};

	it.each([1, 2, 3, 4])(
		'idle, hold, ramp, hold and a closed-throttle run-down, with a throttle channel (%d)',
		(seed) => {
			const { engine, bytes } = shape(
				(e) => [
					hold(e.loRpm, 5, 0.1),
					hold(e.loRpm, 4, 1),
					up(e, 30),
					hold(e.hiRpm, 3, 1),
					down(e, 10, -0.1),
					hold(e.loRpm, 5, 0.1)
				],
				seed,
				{},
				{ throttle: true }
			);
			expectFigures(ready(bytes, sweepContext()), engine, 'throttle');
		}
	);

	it.each([1, 2, 3, 4])(
		'a part-load hold before the ramp and a run-down after it, without a throttle channel (%d)',
		(seed) => {
			const { engine, bytes } = shape((e) => [hold(e.loRpm, 6, 0.3), up(e, 30), down(e, 8, -0.1)], seed);
			expectFigures(ready(bytes, sweepContext()), engine, 'no throttle');
		}
	);

	it.each([1, 2, 3])('a ramp down alone (%d)', (seed) => {
		const { engine, bytes } = shape((e) => [down(e, 30)], seed);
		expectFigures(ready(bytes, sweepContext()), engine, 'down');
	});

	it.each([1, 2, 3])('up and down, kept apart and said (%d)', (seed) => {
		const { engine, bytes } = shape((e) => [up(e, 30), down(e, 30)], seed);
		const analysed = ready(bytes, sweepContext());
		expectFigures(analysed, engine, 'up and down');
		expect(analysed.findings.map(({ code }) => code)).toContain('other_direction');
	});

	it.each([1, 2, 3])('speed in steps of 5 s (%d)', (seed) => {
		const { engine, bytes } = shape(
			(e) => Array.from({ length: 25 }, (_, k) => hold(e.loRpm + ((e.hiRpm - e.loRpm) * k) / 24, 5, 1)),
			seed
		);
		expectFigures(ready(bytes, sweepContext()), engine, 'steps');
	});

	it.each([1, 2, 3, 4])('a fast ramp whose inertia takes several per cent of the torque (%d)', (seed) => {
		const random = seeded(100 + seed);
		const engine = engineOf(random);
		const seconds = 12;
		const rate = ((engine.hiRpm - engine.loRpm) / seconds) * ((2 * Math.PI) / 60);
		const inertiaKgM2 = (0.08 * figuresOf(engine).peak_torque) / rate;
		const samples = record(engine, [up(engine, seconds)], { rateHz: 100, noise: 0.004, inertiaKgM2 }, random);
		const context = sweepContext();
		const half = { ...context, engine: { ...context.engine, inertiaKgM2: inertiaKgM2 / 2 } };
		// Half of it in the engine, half in the rotor of a swinging stator.
		const stator = {
			...half,
			cell: { torqueAt: 'stator', rotorInertiaKgM2: inertiaKgM2 / 2, shaftInertiaKgM2: 0 }
		} as const;
		expectFigures(ready(write(samples, PLAIN), stator), engine, 'stator');
		const uncorrected = metric(ready(write(samples, PLAIN), context), 'peak_torque');
		expect(uncorrected).toBeLessThan(0.95 * figuresOf(engine).peak_torque);
		const flange = metric(ready(write(samples, PLAIN), half), 'peak_torque');
		expect(flange / figuresOf(engine).peak_torque).toBeCloseTo(0.96, 2);
	});

	it('a slow recorder on a fast ramp gets wider bins, and says so', () => {
		const { engine, bytes } = shape((e) => [up(e, 10)], 5, { rateHz: 10, noise: 0.002 });
		const analysed = ready(bytes, sweepContext());
		expect(analysed.findings.map(({ code }) => code)).toContain('bin_width');
		expect(Math.abs(metric(analysed, 'peak_power') / figuresOf(engine).peak_power - 1)).toBeLessThan(0.005);
	});

	it('a delay of the fuel meter is taken out', () => {
		const random = seeded(11);
		const engine = engineOf(random);
		const samples = record(engine, [up(engine, 20)], { rateHz: 50, noise: 0.002 }, random);
		const late = samples.map((sample, at) => ({ ...sample, fuel: samples[Math.max(at - 60, 0)]!.fuel }));
		const map = (delayS: number) =>
			(['time', 'speed', 'torque', 'fuel_flow'] as const).map((channel, index) => ({
				index,
				channel,
				unit: ['s', 'rpm', 'Nm', 'kg/h'][index]!,
				...(channel === 'fuel_flow' ? { delayS } : {})
			}));
		const bte = figuresOf(engine).bte_max;
		const mended = metric(ready(write(late, PLAIN), sweepContext({ map: map(1.2) })), 'bte_max');
		const left = metric(ready(write(late, PLAIN), sweepContext({ map: map(0) })), 'bte_max');
		expect(Math.abs(mended - bte)).toBeLessThan(0.002);
		expect(left - bte).toBeGreaterThan(0.01);
	});
});
