import { describe, expect, it } from 'vitest';
import { converter } from '../units/convert';
import { parseUnit } from '../units/parse';
import { figureText, valueText } from './figure';
import { shownAs } from './unit-system';

/** NIST Special Publication 811 (2008), Appendix B.8: what one of the unit is in SI, as printed there. */
const NIST_SP_811 = [
	['power', 'kW', 'hp', 7.456_999e-1],
	['torque', 'N·m', 'lbf·ft', 1.355_818],
	['manifold_pressure', 'kPa', 'psi', 6.894_757],
	['barometer', 'kPa', 'inHg', 3.386_389],
	['fuel_used_mass', 'kg', 'lb', 4.535_923_7e-1],
	['fuel_flow', 'kg/h', 'lb/h', 1.259_979e-4 * 3600],
	['displacement', 'L', 'in³', 1.638_706e-2],
	['fuel_flow_volume', 'L/h', 'US gal/h', 3.785_412],
	['vehicle_speed', 'km/h', 'mph', 1.609_344]
] as const;

describe('US customary units', () => {
	it.each(NIST_SP_811)('%s in %s is shown in %s by the factor of NIST SP 811', (code, unit, shown, size) => {
		const as = shownAs('us', code, unit);
		expect(as.unit).toBe(shown);
		expect(Math.abs(as.value(size) - 1)).toBeLessThan(5e-7);
	});

	it.each([
		['kW', 'hp'],
		['N·m', 'lbf·ft'],
		['kPa', 'psi'],
		['°C', '°F'],
		['kg', 'lb'],
		['kg/h', 'lb/h'],
		['g/kWh', 'lb/(hp·h)'],
		['L', 'in³'],
		['L/h', 'US gal/h'],
		['km/h', 'mph']
	])('%s → %s agrees with the units that files are read in', (unit, shown) => {
		const convert = converter(parseUnit(unit)!, parseUnit(shown)!)!;
		const { value } = shownAs('us', 'x', unit);
		for (const each of [-40, 0, 1, 87.3, 4200])
			expect(value(each)).toBeCloseTo(convert(each), 9 - Math.ceil(Math.log10(1 + Math.abs(convert(each)))));
	});

	it('moves the zero of a temperature, and of no difference of temperatures', () => {
		expect(shownAs('us', 'coolant_temp', '°C').value(100)).toBeCloseTo(212, 10);
		expect(shownAs('us', 'coolant_temp', '°C').value(-40)).toBeCloseTo(-40, 10);
		expect(shownAs('us', 'coolant_temp', '°C').difference(10)).toBeCloseTo(18, 10);
		expect(shownAs('us', 'inlet_over_ambient_min', 'K').value(10)).toBeCloseTo(18, 10);
		expect(shownAs('us', 'sd_coolant_temp', '°C').value(10)).toBeCloseTo(18, 10);
	});

	it('leaves alone what both read alike, and everything for who reads SI', () => {
		expect(shownAs('us', 'speed', 'rev/min')).toMatchObject({ unit: 'rev/min', moreDecimals: 0 });
		expect(shownAs('us', 'speed', 'rev/min').value(6500)).toBe(6500);
		expect(shownAs('si', 'power', 'kW').value(126.9)).toBe(126.9);
	});

	it('shows a figure with its uncertainty and its place in one custom', () => {
		const power = { value: 126.9, unit: 'kW', u: 0.4, at: { speed: 6516 }, method: 'local-fit.1' };
		const text = figureText('peak_power', power, 'us');
		expect(text).toMatchObject({
			value: '170.2',
			plusMinus: '1.1',
			unit: 'hp',
			at: 'at 6\u2009516\u00A0rev/min'
		});
		const warm = { value: 90, unit: '°C', u: 0.5, at: null, method: 'extreme.1' };
		expect(figureText('coolant_temp_max', warm, 'us')).toMatchObject({
			value: '194.0',
			plusMinus: '1.8',
			unit: '°F'
		});
		expect(valueText('bsfc_min', 240, 'us')).toBe('0.3946');
		expect(valueText('peak_torque', 200, 'us')).toBe('147.5');
		expect(valueText('bte_max', 0.38, 'us')).toBe(valueText('bte_max', 0.38));
	});
});
