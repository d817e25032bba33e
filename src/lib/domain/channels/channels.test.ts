import { describe, expect, it } from 'vitest';
import { parseUnit } from '../units/parse';
import { CATALOGUE, channelOf, splitCode } from './catalogue';
import { classifyHeader } from './classify';
import { splitHeader } from './split-header';

const read = (header: string, unitRow: string | null = null) => {
	const { name, unit } = splitHeader(header);
	return classifyHeader(name, unit ?? unitRow);
};

describe('catalogue', () => {
	it('keeps each channel in a unit of its own kind', () => {
		for (const { code, unit, dimension, possible } of CATALOGUE.values()) {
			expect(parseUnit(unit)?.dimension, code).toBe(dimension);
			expect(possible[0], code).toBeLessThan(possible[1]);
		}
	});

	it('numbers what may occur several times and nothing else', () => {
		expect(splitCode('exhaust_temp.3')).toEqual({ base: 'exhaust_temp', index: 3 });
		expect(splitCode('speed')).toEqual({ base: 'speed', index: null });
		expect(channelOf('exhaust_temp.3')?.code).toBe('exhaust_temp');
		expect(channelOf('speed.2')).toBeNull();
		expect(channelOf('my own column')).toBeNull();
		expect(channelOf('exhaust_temp.0')).toBeNull();
	});
});

describe('splitHeader', () => {
	it.each([
		['speed [rpm]', 'speed', 'rpm'],
		['Torque (ft-lb)', 'Torque', 'ft-lb'],
		['Torque (N * m)', 'Torque', 'N * m'],
		['Lambda    [-]', 'Lambda', '-'],
		['BSFC [g/(kW·h)]', 'BSFC', 'g/(kW·h)'],
		['speed_radps', 'speed', 'radps'],
		['Torque_ftlb', 'Torque', 'ftlb'],
		['coolant_temp_C', 'coolant_temp', 'C'],
		['time_s', 'time', 's'],
		['n / min-1', 'n', 'min-1'],
		['T / °C', 'T', '°C'],
		['Speed, rpm', 'Speed', 'rpm'],
		['MAP kPa', 'MAP', 'kPa'],
		['RPM', 'RPM', 'RPM'],
		['[rpm]', 'rpm', 'rpm'],
		['"Time (sec)"', 'Time', 'sec'],
		['\uFEFFtime [s]', 'time', 's'],
		['T_AMB', 'T_AMB', null],
		['P_A', 'P_A', null],
		['T_C', 'T_C', null],
		['N', 'N', null],
		['speed []', 'speed', null],
		['Note (free text here)', 'Note', 'free text here'],
		['', '', null]
	])('%j', (header, name, unit) => {
		expect(splitHeader(header)).toEqual({ name, unit });
	});
});

describe('classifyHeader', () => {
	it.each([
		['time [s]', 'time'],
		['Time', 'time'],
		['speed [rpm]', 'speed'],
		['torque [Nm]', 'torque'],
		['fuel flow [kg/h]', 'fuel_flow'],
		['air flow [kg/h]', 'air_flow'],
		['lambda [-]', 'lambda_sensor'],
		['Lambda', 'lambda_sensor'],
		['MAP [kPa]', 'manifold_pressure'],
		['MAP (psia)', 'manifold_pressure'],
		['manifold temp [degC]', 'manifold_temp'],
		['Manifold Temp (F)', 'manifold_temp'],
		['coolant [degC]', 'coolant_temp'],
		['oil pressure [kPa]', 'oil_pressure'],
		['EGT [degC]', 'exhaust_temp'],
		['electrical power [kW]', 'electrical_power'],
		['N_ENG [1/min]', 'speed'],
		['M_DYN [N.m]', 'torque'],
		['FUELRATE [g/s]', 'fuel_flow'],
		['AIRRATE [g/s]', 'air_flow'],
		['P_BARO [hPa]', 'barometer'],
		['T_AMB [K]', 'ambient_temp'],
		['Engine Speed (RPM)', 'speed'],
		['Torque (lb-ft)', 'torque'],
		['Fuel Flow (lb/hr)', 'fuel_flow'],
		['Air Flow (lb/min)', 'air_flow'],
		['omega [rad/s]', 'speed'],
		['speed_radps', 'speed'],
		['RPM', 'speed'],
		['Mass of Fuel (Kg/sec)', 'fuel_flow'],
		['Total Volume of Fuel  (CC/min)', 'fuel_flow_volume'],
		['T_exh [°C]', 'exhaust_temp'],
		['Exhaust Temp (deg C)', 'exhaust_temp'],
		['air_fuel_ratio', 'afr_sensor'],
		['Öldruck [bar]', 'oil_pressure'],
		['Ignition [°BTDC]', 'ignition_advance'],
		['NOx [ppm]', 'nox'],
		['power [kW]', 'power']
	])('is sure that %s is %s', (header, code) => {
		const found = read(header);
		expect(found.code).toBe(code);
		expect(found.confidence).toBeGreaterThanOrEqual(0.85);
	});

	it.each([
		['Zeit', 's', 'time'],
		['Drehzahl', '1/min', 'speed'],
		['Drehmoment', 'Nm', 'torque'],
		['Kraftstoff', 'kg/h', 'fuel_flow'],
		['Luftmasse', 'kg/h', 'air_flow'],
		['T_Saugrohr', '°C', 'manifold_temp']
	])('takes the unit of %s from a row below: %s', (header, unit, code) => {
		const found = read(header, unit);
		expect(found.code).toBe(code);
		expect(found.confidence).toBeGreaterThanOrEqual(0.85);
	});

	it('lets the unit decide where the header leaves it open', () => {
		expect(read('fuel flow [L/h]')).toMatchObject({ code: 'fuel_flow_volume' });
		expect(read('Kraftstoff [l/h]')).toMatchObject({ code: 'fuel_flow_volume' });
		expect(read('Luftmasse [m³/h]')).toMatchObject({ code: 'air_flow_volume' });
		expect(read('manifold [kPa]')).toMatchObject({ code: 'manifold_pressure' });
		expect(read('fuel flow [L/h]').confidence).toBeGreaterThanOrEqual(0.85);
	});

	it('numbers repeated channels', () => {
		expect(read('EGT3 [°C]').code).toBe('exhaust_temp.3');
		expect(read('T_exh_2 [°C]').code).toBe('exhaust_temp.2');
		expect(read('Exhaust temp cyl 4 [°C]').code).toBe('exhaust_temp.4');
		expect(read('CO2 [%]').code).toBe('co2');
		expect(read('O2 [%]').code).toBe('o2');
	});

	it.each(['Temperature [°C]', 'T / °C', 'Pressure [kPa]', 'Druck [mbar]', 'T1 [°C]', 'p2 [bar]'])(
		'%s does not say where: low',
		(header) => {
			expect(read(header).confidence).toBeLessThan(0.5);
			expect(read(header).reasons.join(' ')).toMatch(/where|station/);
		}
	);

	it('asks where boost is taken', () => {
		const found = read('Ladedruck abs', 'mbar');
		expect(found.code).toBe('boost_pressure');
		expect(found.confidence).toBeLessThan(0.8);
	});

	it.each(['torque [kg/h]', 'Air (mmWC)', 'speed [°C]', 'lambda [kPa]'])(
		'%s contradicts itself: not used',
		(header) => {
			expect(read(header).confidence).toBeLessThan(0.3);
		}
	);

	it.each(['Torque [blorb]', 'humidity [g/kg]'])('%s has a unit nobody knows: low', (header) => {
		expect(read(header).confidence).toBeLessThanOrEqual(0.3);
		expect(read(header).reasons.join(' ')).toContain('not known');
	});

	it('is less sure without a unit, and least for a place or a letter alone', () => {
		expect(read('Md').confidence).toBe(0.7);
		expect(read('coolant').confidence).toBe(0.4);
		expect(read('b').confidence).toBe(0.4);
	});

	it.each(['Load (kg)', 'phi', 'EQR', 'injected_fuel_mass', 'fuel [mg/stroke]', 'absolute humidity [g/kg]'])(
		'%s is none, and says why',
		(header) => {
			expect(read(header)).toMatchObject({ code: null, confidence: 0 });
			expect(read(header).reasons[0]).toMatch(/[.]$/);
		}
	);

	it.each(['input2', 'target1', '', 'Bemerkung'])('knows no channel %j', (header) => {
		expect(read(header).code).toBeNull();
	});

	it('takes a bare flow unit for a guess', () => {
		expect(read('kg/h').confidence).toBeLessThan(0.3);
	});
});
