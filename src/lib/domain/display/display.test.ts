import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CATALOGUE } from '../channels/catalogue';
import { figureText, valueText, valueWithUnit } from './figure';
import {
	decimalsOf,
	formatBytes,
	formatCount,
	formatDuration,
	formatNumber,
	formatSpan,
	formatWithUncertainty,
	NONE,
	plainNumber,
	THIN
} from './format';
import { labelOf, METRIC_CODES } from './labels';

describe('formatNumber', () => {
	it.each([
		[6516, 0, `6${THIN}516`],
		[126.903, 2, '126.90'],
		[1234567.891, 1, `1${THIN}234${THIN}567.9`],
		[-0.5, 1, '−0.5'],
		[-0.04, 1, '0.0'],
		[0, 2, '0.00'],
		[12345, -2, `12${THIN}300`],
		[-1250, -2, `−1${THIN}300`],
		[NaN, 2, NONE],
		[Infinity, 0, NONE]
	])('%f to %i decimals is %s', (value, decimals, text) => expect(formatNumber(value, decimals)).toBe(text));
	it('says nothing for nothing', () => expect(formatNumber(null, 1)).toBe(NONE));
	it('reads back to the value within half a step', () => {
		fc.assert(
			fc.property(
				fc.double({ min: -1e9, max: 1e9, noNaN: true }),
				fc.integer({ min: 0, max: 6 }),
				(value, decimals) => {
					const back = Number(formatNumber(value, decimals).replaceAll(THIN, '').replace('−', '-'));
					expect(Math.abs(back - value)).toBeLessThanOrEqual(0.5001 * 10 ** -decimals);
				}
			)
		);
	});
});

describe('plainNumber', () => {
	it.each([
		[3.7, '3.7'],
		[10500, `10${THIN}500`],
		[-0.00083, '−0.00083'],
		[8.3e-7, '0.00000083'],
		[0, '0']
	])('%f is %s', (value, text) => expect(plainNumber(value)).toBe(text));
});

describe('significant digits', () => {
	it.each([
		[0.8, 2],
		[0.0996, 2],
		[0.099, 3],
		[12.4, 0],
		[99.6, -1],
		[123, -1],
		[0, 0]
	])('two of %f need %i decimals', (value, decimals) => expect(decimalsOf(value, 2)).toBe(decimals));
	it.each([
		[126.9038, 0.8, '126.90', '0.80'],
		[126.9038, 0.0996, '126.90', '0.10'],
		[1320.86, 14.2, `1${THIN}321`, '14'],
		[1320.86, 123, `1${THIN}320`, '120'],
		[34.512, 0.00049, '34.51200', '0.00049']
	])('%f with U %f is %s ± %s', (value, expanded, text, plusMinus) =>
		expect(formatWithUncertainty(value, expanded)).toEqual({ value: text, plusMinus })
	);
});

describe('sizes and times', () => {
	it.each([
		[0, '0 B'],
		[999, '999 B'],
		[1000, '1.0 kB'],
		[999_960, '1.0 MB'],
		[161_505, '162 kB'],
		[2_345_678_901, '2.3 GB']
	])('%i bytes: %s', (bytes, text) => expect(formatBytes(bytes)).toBe(text));
	it.each([
		[0.42, '0.4 s'],
		[9.96, '10 s'],
		[59.6, '1 min 00 s'],
		[725, '12 min 05 s'],
		[12_000, '3 h 20 min'],
		[NaN, NONE]
	])('%f s: %s', (seconds, text) => expect(formatDuration(seconds)).toBe(text));
	it.each([
		[18, 18.6, '18.00–18.60 s'],
		[18, 18.001, 'at 18.00 s'],
		[0, 1200, `0–1${THIN}200 s`]
	])('%f to %f: %s', (from, to, text) => expect(formatSpan(from, to)).toBe(text));
	it('counts', () =>
		expect([1, 0, 5000].map((n) => formatCount(n, 'run'))).toEqual(['1 run', '0 runs', `5${THIN}000 runs`]));
});

describe('labels', () => {
	it('name every metric once', () => {
		const labels = METRIC_CODES.map((code) => labelOf(code).label);
		expect(new Set(labels).size).toBe(METRIC_CODES.length);
		expect(METRIC_CODES).toHaveLength(45);
	});
	it('name every canonical channel', () => {
		for (const code of CATALOGUE.keys()) expect(labelOf(code).label, code).not.toBe(code);
	});
	it('number an indexed channel', () =>
		expect(labelOf('exhaust_temp.3').label).toBe('Exhaust temperature 3'));
	it('leave a column under its own header', () =>
		expect(labelOf('Gearbox T1', '°C')).toEqual({
			label: 'Gearbox T1',
			unit: '°C',
			decimals: 2,
			percent: false
		}));
	it.each([
		['sd_speed', 'Engine speed, standard deviation', 'rev/min'],
		['cov_torque', 'Torque, coefficient of variation', '%'],
		['raw_max_fuel_flow', 'Fuel flow, highest single sample', 'kg/h'],
		['power_corrected', 'Power, corrected', 'kW']
	])('say in words what %s is of', (code, label, unit) => {
		expect(labelOf(code)).toMatchObject({ label, unit });
	});
	it('print no unit for a pure number', () => expect(labelOf('lambda_sensor').unit).toBe(''));
});

describe('a figure', () => {
	it('shows U = 2u to two digits and the place', () => {
		const text = figureText('peak_power', {
			value: 126.9038,
			unit: 'kW',
			u: 0.4,
			at: { speed: 6516 },
			method: 'local-fit.1'
		});
		expect(text).toEqual({
			label: 'Peak power',
			value: '126.90',
			plusMinus: '0.80',
			unit: 'kW',
			at: `at 6${THIN}516\u00A0rev/min`,
			outside: null
		});
	});
	it('turns a fraction and its uncertainty into %', () => {
		const text = figureText('bte_max', { value: 0.34512, unit: '–', u: 0.0021, at: null, method: 'm' });
		expect([text.value, text.plusMinus, text.unit]).toEqual(['34.51', '0.42', '%']);
	});
	it('keeps the usual decimals where no uncertainty is known', () => {
		const text = figureText('bmep_max', { value: 1320.86, unit: 'kPa', u: null, at: null, method: 'm' });
		expect([text.value, text.plusMinus]).toEqual([`1${THIN}321`, null]);
	});
	it('does not say a speed twice', () => {
		const metric = { value: 6516, unit: 'rev/min', u: null, at: { speed: 6516 }, method: 'm' };
		expect(figureText('peak_power_speed', metric).at).toBeNull();
	});
	it('takes what arithmetic leaves over for no uncertainty', () => {
		const metric = { value: 1.01358969, unit: '–', u: 3.5e-16, at: null, method: 'm' };
		expect(figureText('correction_factor', metric)).toMatchObject({ value: '1.0136', plusMinus: null });
	});
	it('is a dash when there is none', () => expect(figureText('bte_max', null).value).toBe(NONE));
	it('writes single values', () => {
		expect(valueText('bte', 0.3451)).toBe('34.51');
		expect(valueWithUnit('speed', 6516)).toBe(`6${THIN}516\u00A0rev/min`);
		expect(valueText('torque', null)).toBe(NONE);
	});
});
