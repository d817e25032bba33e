import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { converter, convertArray } from './convert';
import { DIMENSIONS, type Dimension } from './dimensions';
import { parseUnit, refusedUnit } from './parse';
import { UNIT_ROWS } from './table';

describe('parseUnit', () => {
	const spelled: [text: string, unit: string, dimension: Dimension][] = [
		...['Nm', 'N.m', 'N·m', 'N*m', 'N * m', 'N m', 'N-m', '[N*m]', 'NM'].map(
			(text): [string, string, Dimension] => [text, 'N·m', 'torque']
		),
		...['lb-ft', 'ft-lb', 'lbf·ft', 'ftlb', 'ft-lbs', 'lb ft', 'LB-FT', 'ft lbf'].map(
			(text): [string, string, Dimension] => [text, 'lbf·ft', 'torque']
		),
		...['1/min', 'rpm', 'RPM', 'rev/min', '(RPM)', 'min-1', 'min^-1', 'U/min', 'r/min', 'min⁻¹'].map(
			(text): [string, string, Dimension] => [text, 'rev/min', 'rotational_speed']
		),
		...['degC', '°C', 'Â°C', 'C', 'deg C', 'ºC', '℃', '\uFFFDC', '\u00a0°C '].map(
			(text): [string, string, Dimension] => [text, '°C', 'temperature']
		),
		...['F', 'degF', '°F', 'deg F'].map((text): [string, string, Dimension] => [text, '°F', 'temperature']),
		...['m³/h', 'm3/h', 'm^3/h'].map((text): [string, string, Dimension] => [text, 'm³/h', 'volume_flow']),
		...['kg·m²', 'kg m2', 'kg*m^2'].map((text): [string, string, Dimension] => [text, 'kg·m²', 'inertia']),
		['rad/s', 'rad/s', 'rotational_speed'],
		['radps', 'rad/s', 'rotational_speed'],
		['mbar', 'mbar', 'pressure'],
		['hPa', 'hPa', 'pressure'],
		['inHg', 'inHg', 'pressure'],
		['mmHg', 'mmHg', 'pressure'],
		['mmWC', 'mmH2O', 'pressure'],
		['mmH2O', 'mmH2O', 'pressure'],
		['Kg/sec', 'kg/s', 'mass_flow'],
		['lb/hr', 'lb/h', 'mass_flow'],
		['lb/min', 'lb/min', 'mass_flow'],
		['g/s', 'g/s', 'mass_flow'],
		['CC/min', 'mL/min', 'volume_flow'],
		['l/h', 'L/h', 'volume_flow'],
		['%', '%', 'percent'],
		['-', '-', 'ratio'],
		['[-]', '-', 'ratio'],
		['ppm', 'ppm', 'concentration'],
		['PS', 'PS', 'power'],
		['HP', 'hp', 'power'],
		['W', 'W', 'power'],
		['km/h', 'km/h', 'velocity'],
		['mph', 'mph', 'velocity'],
		['ms', 'ms', 'time'],
		['Sec', 's', 'time'],
		['h', 'h', 'time'],
		['V', 'V', 'voltage'],
		['A', 'A', 'current'],
		['lb/(hp·h)', 'lb/(hp·h)', 'specific_consumption']
	];
	it.each(spelled)('reads %j as %s', (text, unit, dimension) => {
		expect(parseUnit(text)).toMatchObject({ unit, dimension });
	});

	it.each([
		['psia', 'psi', 'absolute'],
		['psig', 'psi', 'gauge'],
		['kPa abs', 'kPa', 'absolute'],
		['kPa(a)', 'kPa', 'absolute'],
		['bar (abs)', 'bar', 'absolute'],
		['bar g', 'bar', 'gauge'],
		['barg', 'bar', 'gauge'],
		['mbar gauge', 'mbar', 'gauge']
	])('%s says what it is measured from', (text, unit, reference) => {
		expect(parseUnit(text)).toMatchObject({ unit, reference });
	});

	it('says nothing of the reference where the unit does not', () => {
		for (const text of ['psi', 'kPa', 'bar', 'hPa']) expect(parseUnit(text)).not.toHaveProperty('reference');
	});

	it('keeps a milliwatt from being a megawatt', () => {
		expect(parseUnit('MW')?.toInternal(1)).toBe(1000);
		expect(parseUnit('mW')).toBeNull();
		expect(parseUnit('MPa')?.toInternal(1)).toBe(1000);
		expect(parseUnit('mPa')).toBeNull();
	});

	it.each([null, undefined, '', '  ', 'furlong', 'kg/h abs', 'N_ENG', '12.5'])('does not know %j', (text) => {
		expect(parseUnit(text)).toBeNull();
	});

	it('has one meaning for each spelling', () => {
		const seen = new Map<string, string>();
		for (const row of UNIT_ROWS)
			for (const spelling of [row.unit, ...row.spellings]) {
				expect(seen.get(spelling) ?? row.unit, spelling).toBe(row.unit);
				seen.set(spelling, row.unit);
				expect(parseUnit(spelling)?.unit, spelling).toBe(row.unit);
			}
	});

	it('reads the internal unit of every dimension as itself', () => {
		for (const [dimension, { unit }] of Object.entries(DIMENSIONS)) {
			const parsed = parseUnit(unit);
			expect(parsed?.dimension, unit).toBe(dimension);
			expect(parsed?.toInternal(7.25), unit).toBe(7.25);
		}
	});
});

describe('refusedUnit', () => {
	it.each([
		'mg/stroke',
		'mg/str',
		'mm3/stroke',
		'[mg/Hub]',
		'mm³/inj',
		'mg/cycle',
		'cc in 20 s',
		'SLPM',
		'scfm',
		'Nm³/h'
	])('%s is refused with a sentence', (text) => {
		expect(refusedUnit(text)).toMatch(/^[A-Z].*\.$/);
		expect(parseUnit(text)).toBeNull();
	});
	it.each(['kg/h', 'L/h', 'rpm', 'nonsense', '', null, 's', 'Nm'])('%s is not refused', (text) => {
		expect(refusedUnit(text)).toBeNull();
	});
});

describe('conversion', () => {
	it.each([
		['0', '°F', -17.77777777777778],
		['77', '°F', 25],
		['273.15', 'K', 0],
		['-40', '°F', -40],
		['491.67', '°R', 0]
	])('%s %s is %f °C', (value, unit, celsius) => {
		expect(parseUnit(unit)!.toInternal(Number(value))).toBeCloseTo(celsius, 10);
	});

	it('keeps a difference of temperatures free of the offset', () => {
		expect(parseUnit('°F')!.differenceToInternal(9)).toBeCloseTo(5, 12);
		expect(parseUnit('K')!.differenceToInternal(3)).toBe(3);
		expect(parseUnit('psi')!.differenceToInternal(1)).toBeCloseTo(6.894757293168, 10);
	});

	it.each([
		['g/s', 3.6],
		['kg/s', 3600],
		['hPa', 0.1],
		['mbar', 0.1],
		['mL/min', 0.06],
		['W', 0.001]
	])('1 %s has the whole factor %f', (unit, factor) => {
		expect(parseUnit(unit)!.toInternal(1)).toBe(factor);
	});

	it('goes there and back for every unit', () => {
		fc.assert(
			fc.property(
				fc.constantFrom(...UNIT_ROWS.map((row) => row.unit)),
				fc.double({ min: -1e6, max: 1e6, noNaN: true }),
				(text, value) => {
					const unit = parseUnit(text)!;
					expect(unit.fromInternal(unit.toInternal(value))).toBeCloseTo(value, 6);
				}
			)
		);
	});

	it('keeps the order of values for every unit', () => {
		for (const { unit } of UNIT_ROWS)
			expect(parseUnit(unit)!.toInternal(2)).toBeGreaterThan(parseUnit(unit)!.toInternal(1));
	});

	it('goes between the customs for one thing and between no others', () => {
		const change = (from: string, to: string) => converter(parseUnit(from)!, parseUnit(to)!);
		expect(change('kW', 'MJ/h')!(1)).toBeCloseTo(3.6, 12);
		expect(change('MJ/h', 'kW')!(3.6)).toBeCloseTo(1, 12);
		expect(change('-', '%')!(0.48)).toBeCloseTo(48, 12);
		expect(change('%', 'ppm')!(0.05)).toBeCloseTo(500, 9);
		expect(change('ppm', '%')!(1200)).toBeCloseTo(0.12, 12);
		expect(change('m/s', 'mm/s')!(2)).toBeCloseTo(2000, 9);
		expect(change('N·m', 'MJ')).toBeNull();
		expect(change('kg/h', 'L/h')).toBeNull();
		expect(change('V', 'A')).toBeNull();
	});

	it('turns a column over and keeps its holes', () => {
		expect(convertArray([1, NaN, 3], parseUnit('g/s')!)).toEqual(Float64Array.of(3.6, NaN, 3 * 3.6));
		expect([...convertArray(Float64Array.of(100), parseUnit('kPa')!, 'bar')]).toEqual([1]);
		expect(() => convertArray([1], parseUnit('kPa')!, 'kg/h')).toThrow(/cannot become/);
		expect(() => convertArray([1], parseUnit('kPa')!, 'furlong')).toThrow(/furlong/);
	});
});
