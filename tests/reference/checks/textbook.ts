import { theoreticalAirFlowKgH, volumetricEfficiency } from '../../../src/lib/domain/formulas/breathing';
import { iso1585Spark } from '../../../src/lib/domain/formulas/corrections';
import { massFlowKgH } from '../../../src/lib/domain/formulas/fuel';
import { airDensityKgM3 } from '../../../src/lib/domain/formulas/humid-air';
import * as perf from '../../../src/lib/domain/formulas/performance';
import { siteRating } from '../../../src/lib/domain/formulas/site-rating';
import { converter } from '../../../src/lib/domain/units/convert';
import { parseUnit } from '../../../src/lib/domain/units/parse';
import type { TextbookCase } from '../entries';

/** The books' constants, where they are not ours: g 9.81 m/s² for a load in kgf, R 287 J/(kg·K) for dry air. */
const BOOK_G = 9.81;
const BOOK_GAS = 287;
const OUR_GAS = 287.05;
/** The books' kelvin: °C + 273. */
const BOOK_ZERO = 273;
const KELVIN = 273.15;
const METRES: Record<string, number> = { m: 1, cm: 0.01, mm: 0.001, in: 0.0254, ft: 0.3048 };
/** The books' standard atmosphere: 76 cmHg is 1.0132 bar. */
const CM_HG_KPA = 101.32 / 76;

class Sheet {
	constructor(private readonly example: TextbookCase) {}

	has = (...names: string[]) => names.every((name) => typeof this.example.inputs[name]?.value === 'number');

	raw = (name: string) => this.example.inputs[name]!.value as number;

	/** An input in the internal unit of its kind. */
	get(name: string): number {
		const { value, unit } = this.example.inputs[name]!;
		if (unit === 'cmHg') return (value as number) * CM_HG_KPA;
		return parseUnit(unit)!.toInternal(value as number);
	}

	/** A temperature as the book has it in K. */
	kelvin(name: string): number {
		const { value, unit } = this.example.inputs[name]!;
		return (value as number) + (unit === 'degC' ? BOOK_ZERO : 0);
	}

	metres = (name: string) =>
		(this.example.inputs[name]!.value as number) * METRES[this.example.inputs[name]!.unit]!;

	newtons(name: string): number {
		const { value, unit } = this.example.inputs[name]!;
		return unit === 'kgf' ? (value as number) * BOOK_G : this.get(name);
	}

	first<T>(...ways: [needs: string[], make: () => T][]): T | undefined {
		return ways.find(([needs]) => this.has(...needs))?.[1]();
	}
}

/** Everything the sheet's readings determine, by the functions under test. */
function derive(s: Sheet) {
	const speed = s.first([['engine_speed'], () => s.get('engine_speed')]);
	const nR = s.first<1 | 2>([['strokes_per_cycle'], () => (s.get('strokes_per_cycle') === 4 ? 2 : 1)]);
	const litres = s.first(
		[['displacement'], () => s.get('displacement')],
		[
			['bore', 'stroke', 'cylinders'],
			() => perf.displacementL(1000 * s.metres('bore'), 1000 * s.metres('stroke'), s.get('cylinders'))
		]
	);
	const load = s.first(
		[['brake_load', 'spring_reading'], () => s.newtons('brake_load') - s.newtons('spring_reading')],
		[['brake_load'], () => s.newtons('brake_load')],
		[['net_brake_load'], () => s.newtons('net_brake_load')],
		[['dynamometer_load'], () => s.newtons('dynamometer_load')]
	);
	const arm = s.first(
		[['torque_arm'], () => s.metres('torque_arm')],
		[['brake_drum_diameter'], () => s.metres('brake_drum_diameter') / 2]
	);
	const cycle = litres !== undefined && nR !== undefined;
	const measuredTorque =
		s.first([['brake_torque'], () => s.get('brake_torque')]) ??
		(load !== undefined && arm !== undefined ? load * arm : undefined) ??
		(s.has('bmep') && cycle ? s.get('bmep') / perf.bmepKpa(1, litres, nR) : undefined);
	const fromTorque =
		speed !== undefined && measuredTorque !== undefined
			? perf.brakePowerKw(speed, measuredTorque)
			: undefined;
	const power =
		s.first(
			[['brake_power'], () => s.get('brake_power')],
			[
				['indicated_power', 'mechanical_efficiency'],
				() => (s.get('indicated_power') * s.get('mechanical_efficiency')) / 100
			],
			[['dynamometer_constant'], () => (load! * speed!) / s.raw('dynamometer_constant')],
			[
				['generator_current'],
				() => (s.get('generator_current') * s.get('generator_voltage')) / (10 * s.get('generator_efficiency'))
			]
		) ??
		fromTorque ??
		// Where only specific figures are given, the sheet is worked for 1 kW.
		(s.has('fuel_mass_flow') || s.has('fuel_mass') ? undefined : 1);
	const torque =
		measuredTorque ??
		(power !== undefined && speed !== undefined ? perf.torqueFromPowerNm(power, speed) : undefined);
	const lhv = s.first([['lhv'], () => s.get('lhv')], [['heating_value'], () => s.get('heating_value')]);
	const hours = s.first([['test_duration'], () => s.get('test_duration') / 3600]);
	const fuel = s.first(
		[['fuel_mass_flow'], () => s.get('fuel_mass_flow')],
		[
			['fuel_volume_flow', 'fuel_specific_gravity'],
			() => massFlowKgH(s.get('fuel_volume_flow'), 1000 * s.get('fuel_specific_gravity'))
		],
		[
			['fuel_volume', 'fuel_time'],
			() =>
				massFlowKgH((3600 * s.get('fuel_volume')) / s.get('fuel_time'), 1000 * s.get('fuel_specific_gravity'))
		],
		[['fuel_mass', 'test_duration'], () => s.get('fuel_mass') / hours!],
		[['bsfc'], () => (s.get('bsfc') * power!) / 1000],
		[['brake_thermal_efficiency'], () => (360 * power!) / (s.get('brake_thermal_efficiency') * lhv!)]
	);
	const air = s.first(
		[['air_mass_flow'], () => s.get('air_mass_flow')],
		[['air_fuel_ratio'], () => (fuel === undefined ? NaN : s.get('air_fuel_ratio') * fuel)],
		[['air_mass', 'test_duration'], () => s.get('air_mass') / hours!]
	);
	return { speed, nR, litres, torque, fromTorque, power, lhv, fuel, air };
}

/** Density at the station whose state the sheet gives, with the book's gas constant and kelvin. */
function density(s: Sheet): number | undefined {
	// 29.27 kgf·m/(kg·K), where a book gives it, is 287.04 J/(kg·K).
	const gas = s.has('gas_constant') ? s.raw('gas_constant') * 9.80665 : BOOK_GAS;
	const at = (p: string, t: string): [string[], () => number] => [
		[p, t],
		() => (airDensityKgM3(s.get(p), 0, s.kelvin(t) - KELVIN) * OUR_GAS) / gas
	];
	return s.first(
		at('intake_pressure', 'intake_temperature'),
		at('manifold_pressure', 'manifold_temperature'),
		at('ambient_pressure', 'ambient_temperature')
	);
}

function rating(s: Sheet) {
	const state = (place: string) => ({
		pressureKpa: s.get(`${place}_pressure`),
		temperatureK: s.kelvin(`${place}_temperature`),
		humidity: s.has(`${place}_relative_humidity`) ? s.get(`${place}_relative_humidity`) / 100 : 0,
		saturationKpa: s.has(`${place}_saturation_pressure`) ? s.get(`${place}_saturation_pressure`) : 0,
		coolantK: s.has(`${place}_coolant_temperature`) ? s.kelvin(`${place}_coolant_temperature`) : 298
	});
	const exponents = { a: s.has('a') ? s.get('a') : 0, m: s.get('m'), n: s.get('n'), s: s.get('q') };
	const to = (place: string) =>
		siteRating(state(place), state('reference'), exponents, s.get('mechanical_efficiency') / 100);
	return to;
}

/** Values in the internal unit of their kind, by output name; only those that a function of ours makes. */
function internalOutputs(example: TextbookCase): Record<string, number | undefined> {
	const s = new Sheet(example);
	const { speed, nR, litres, torque, fromTorque, power, lhv, fuel, air } = derive(s);
	const rho = density(s);
	const cycle = speed !== undefined && nR !== undefined;
	const given = (name: string) => s.has(name);
	const drawn =
		rho !== undefined && cycle && litres !== undefined
			? theoreticalAirFlowKgH(rho, litres, speed, nR)
			: undefined;
	const efficiency =
		power !== undefined && fuel !== undefined && lhv !== undefined
			? perf.brakeThermalEfficiency(power, fuel, lhv)
			: undefined;
	const outputs: Record<string, number | undefined> = {
		brake_power: given('brake_power') || given('dynamometer_constant') ? undefined : fromTorque,
		brake_torque: given('brake_torque') || given('brake_load') ? undefined : torque,
		bmep:
			litres !== undefined && torque !== undefined && nR !== undefined
				? perf.bmepKpa(torque, litres, nR)
				: undefined,
		bsfc:
			power !== undefined && fuel !== undefined && !given('bsfc') ? perf.bsfcGKwh(fuel, power) : undefined,
		brake_thermal_efficiency: efficiency !== undefined ? 100 * efficiency : undefined,
		air_fuel_ratio: air !== undefined && fuel !== undefined ? perf.airFuelRatio(air, fuel) : undefined,
		fuel_power: fuel !== undefined && lhv !== undefined ? perf.fuelPowerKw(fuel, lhv) : undefined,
		fuel_heat_rate: fuel !== undefined && lhv !== undefined ? perf.fuelEnergyFlowMjH(fuel, lhv) : undefined,
		volumetric_efficiency:
			air !== undefined && rho !== undefined && cycle && litres !== undefined
				? 100 * volumetricEfficiency(air, rho, litres, speed, nR)
				: undefined,
		air_mass_flow:
			drawn !== undefined && given('volumetric_efficiency')
				? (drawn * s.get('volumetric_efficiency')) / 100
				: undefined
	};
	if (example.id === 'sol-3.10')
		outputs.volumetric_efficiency =
			100 * volumetricEfficiency(s.get('air_volume_flow') / 1000, 1, litres!, speed!, nR!);
	if (example.id === 'mat-18.9')
		outputs.lambda = perf.lambdaFromAfr(
			example.outputs.air_fuel_ratio!.value,
			example.outputs.stoichiometric_afr!.value
		);
	if (example.id === 'mat-27.5') {
		const dry =
			s.get('test_pressure') - (s.get('test_relative_humidity') / 100) * s.get('test_saturation_pressure');
		// The example's references are 99.04 kPa and 298 K: the same ratios against ours.
		const ratio = s.kelvin('test_temperature') / s.kelvin('reference_temperature');
		outputs.correction_factor = iso1585Spark(
			(dry * 99) / s.get('reference_dry_pressure'),
			ratio * 298.15 - KELVIN
		).factor;
	}
	if (/^mat-27\.[12]$/.test(example.id)) {
		const { k, alpha, beta } = rating(s)('site');
		Object.assign(outputs, {
			k,
			power_adjustment_factor: alpha,
			site_power: alpha * s.get('reference_power')
		});
		if (given('reference_bsfc')) outputs.site_bsfc = beta * s.get('reference_bsfc');
	}
	if (example.id === 'mat-27.3') {
		outputs.reference_power = s.get('site_power') / rating(s)('site').alpha;
		outputs.test_power = outputs.reference_power * rating(s)('test').alpha;
	}
	return outputs;
}

/** What our functions make of an example, by output name and in the unit that the example prints. */
export function textbookOutputs(example: TextbookCase): Record<string, number> {
	const units: Record<string, string> = {
		brake_power: 'kW',
		brake_torque: 'N·m',
		bmep: 'kPa',
		bsfc: 'g/kWh',
		brake_thermal_efficiency: '%',
		fuel_power: 'kW',
		fuel_heat_rate: 'MJ/h',
		volumetric_efficiency: '%',
		air_mass_flow: 'kg/h',
		site_power: 'kW',
		site_bsfc: 'g/kWh',
		reference_power: 'kW',
		test_power: 'kW'
	};
	const shown: Record<string, number> = {};
	for (const [name, value] of Object.entries(internalOutputs(example))) {
		const printed = example.outputs[name];
		if (value === undefined || printed === undefined) continue;
		const change = converter(parseUnit(units[name] ?? '-')!, parseUnit(printed.unit)!);
		if (!change) throw new Error(`${example.id}: ${name} in ${printed.unit}`);
		shown[name] = change(value);
	}
	return shown;
}
