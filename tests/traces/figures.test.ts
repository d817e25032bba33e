import { describe, expect, it } from 'vitest';
import { CORRECTION_FACTORS, metric, readyFile, tolerance, truthOf, warnings } from './traces';

const SWEEPS = [
	'sweep-plain.csv',
	'sweep-semicolon-latin1.csv',
	'sweep-us-units.csv',
	'sweep-utf16-clock.txt',
	'sweep-dirty.csv',
	'energy-flow-limit.csv',
	'electrical.csv'
];

describe.each(SWEEPS)('%s', (file) => {
	const truth = truthOf(file);
	const analysed = readyFile(file);
	const figures = Object.entries(truth.metrics ?? {}).filter(([code]) => !(code in CORRECTION_FACTORS));

	it.each(figures)('%s is %d', (code, value) => {
		expect(Math.abs(metric(analysed, code) - value)).toBeLessThanOrEqual(tolerance(code, value));
	});

	it('names unit, place and method of every figure', () => {
		for (const [code, figure] of Object.entries(analysed.metrics)) {
			expect(Number.isFinite(figure.value), code).toBe(true);
			expect(figure.unit, code).not.toBe('');
			expect(figure.method, code).toMatch(/^[a-z0-9-]+\.\d+/);
			expect(figure.u === null || figure.u >= 0, code).toBe(true);
		}
	});
});

describe('atmospheric correction', () => {
	const cases = SWEEPS.flatMap((file) =>
		Object.entries(CORRECTION_FACTORS).flatMap(([code, correction]) => {
			const value = truthOf(file).metrics?.[code];
			return value === undefined ? [] : [[file, correction, value] as const];
		})
	);

	it.each(cases)('%s by %s: factor %d', (file, correction, value) => {
		const analysed = readyFile(file, { correction });
		expect(Math.abs(metric(analysed, 'correction_factor') / value - 1)).toBeLessThan(5e-4);
		const corrected = metric(analysed, 'peak_power_corrected');
		expect(Math.abs(corrected / (metric(analysed, 'peak_power') * value) - 1)).toBeLessThan(1e-3);
		expect(
			Math.abs(metric(analysed, 'peak_torque_corrected') / (metric(analysed, 'peak_torque') * value) - 1)
		).toBeLessThan(1e-3);
		expect(analysed.metrics['peak_power_corrected']?.outsideRange).toBeUndefined();
	});

	it('refuses a compression-ignition engine SAE J1349, with a sentence', () => {
		const analysed = readyFile('sweep-semicolon-latin1.csv', { correction: 'sae_j1349' });
		expect(analysed.metrics['peak_power_corrected']).toBeUndefined();
		expect(analysed.findings.find(({ code }) => code === 'correction_refused')?.message).toMatch(
			/compression/
		);
	});

	it('asks for the boost pressure where α_c needs it and the header does not say its station', () => {
		const analysed = readyFile('sweep-semicolon-latin1.csv', { correction: 'iso_1585' });
		expect(analysed.findings.map(({ code }) => code)).toContain('correction_refused');
		const mapped = readyFile('sweep-semicolon-latin1.csv', {
			correction: 'iso_1585',
			map: [
				['time', 's'],
				['speed', '1/min'],
				['torque', 'Nm'],
				['fuel_flow', 'kg/h'],
				['air_flow', 'kg/h'],
				['boost_pressure', 'mbar'],
				['manifold_temp', '°C']
			].map(([channel, unit], index) => ({ index, channel: channel!, unit: unit! }))
		});
		// f_a = (99/p_s)^0.7·(T/298.15)^1.5 at 100.9 kPa, 18 °C, 35 %: about 0.959; f_m between 0.3 and 1.2.
		expect(metric(mapped, 'correction_factor')).toBeGreaterThan(0.95);
		expect(metric(mapped, 'correction_factor')).toBeLessThan(0.99);
	});

	it('marks a figure outside its method’s range', () => {
		const analysed = readyFile('sweep-plain.csv', {
			correction: 'sae_j1349',
			ambient: { barometerKpa: 98.2, temperatureC: 41, humidityPct: 20 }
		});
		expect(analysed.metrics['peak_power_corrected']?.outsideRange).toMatch(/15 to 35 °C/);
		expect(analysed.metrics['peak_power']?.outsideRange).toBeUndefined();
	});

	it('says what is missing where the run has no ambient', () => {
		const analysed = readyFile('sweep-plain.csv', { correction: 'sae_j1349', ambient: {} });
		expect(analysed.metrics['peak_power_corrected']).toBeUndefined();
		expect(analysed.findings.find(({ code }) => code === 'ambient_missing')?.message).toMatch(
			/barometer, air temperature, humidity/
		);
		expect(metric(analysed, 'peak_power')).toBeCloseTo(126.94, 0);
	});

	it('lets a barometer channel beat the entry', () => {
		const analysed = readyFile('sweep-utf16-clock.txt', {
			correction: 'din_70020',
			ambient: { barometerKpa: 90, temperatureC: 40, humidityPct: 35 }
		});
		// The truth is by the printed 1013 mbar, the formula by 1 atm: 0.025 % apart.
		const truth = truthOf('sweep-utf16-clock.txt').metrics!['cf_din70020']!;
		expect(Math.abs(metric(analysed, 'correction_factor') / truth - 1)).toBeLessThan(3e-4);
	});
});

describe('steady-points.csv', () => {
	const { points = [] } = truthOf('steady-points.csv');
	const analysed = readyFile('steady-points.csv');

	it('finds exactly the points, in order', () => {
		expect(analysed.points.map(({ speed }) => Math.round((speed ?? 0) / 100) * 100)).toEqual(
			points.map(({ speed }) => speed)
		);
	});

	it.each(points.map((point, at) => [at, point] as const))('point %d', (at, truth) => {
		const point = analysed.points[at]!;
		const codes = {
			speed: 'speed',
			torque: 'torque',
			fuel: 'fuel_flow',
			air: 'air_flow',
			power: 'power',
			bsfc: 'bsfc'
		} as const;
		for (const [name, code] of Object.entries(codes)) {
			const value = truth[name as keyof typeof truth];
			expect(Math.abs(point[code]! - value), name).toBeLessThanOrEqual(0.005 * value);
		}
		expect(Math.abs(point['bte']! - truth.bte)).toBeLessThanOrEqual(0.004);
		expect(point['n']).toBeGreaterThanOrEqual(300);
		expect(point['cov_torque']).toBeGreaterThan(0);
		expect(point['time_to']! - point['time_from']!).toBeGreaterThanOrEqual(30);
	});

	it('gives no warning', () => expect(warnings(analysed)).toEqual([]));
});

describe('what the truth expects of the traces without warnings', () => {
	it.each([
		'sweep-plain.csv',
		'sweep-semicolon-latin1.csv',
		'sweep-us-units.csv',
		'sweep-utf16-clock.txt',
		'energy-flow-limit.csv',
		'electrical.csv'
	])('%s gives none', (file) => expect(warnings(readyFile(file))).toEqual([]));

	it('tells rows and sample rate', () => {
		const analysed = readyFile('sweep-plain.csv');
		expect(analysed.rows).toBe(2250);
		expect(analysed.sampleRateHz).toBeCloseTo(50, 6);
		expect(analysed.channels.map(({ code }) => code)).toEqual(
			expect.arrayContaining([
				'time',
				'speed',
				'torque',
				'fuel_flow',
				'air_flow',
				'lambda_sensor',
				'manifold_pressure',
				'power',
				'bte'
			])
		);
		expect(analysed.curve['speed']!.length).toBeGreaterThan(50);
		expect(new Set(Object.values(analysed.curve).map((values) => values.length)).size).toBe(1);
	});
});
