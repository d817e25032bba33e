import { channelOf, splitCode } from '../channels/catalogue';
import type { FuelPropertyName } from '../model';

/** How a quantity is written: its name, its unit as text, its decimals when no uncertainty says better. */
export interface Label {
	label: string;
	/** As printed; empty for a bare number. Efficiencies are stored as fractions and printed in %. */
	unit: string;
	decimals: number;
	/** Stored as a fraction, printed as % (value × 100). */
	percent: boolean;
}

const of = (label: string, unit: string, decimals: number): Label => ({
	label,
	unit,
	decimals,
	percent: false
});
const fraction = (label: string, decimals = 1): Label => ({ label, unit: '%', decimals, percent: true });

const METRICS: Readonly<Record<string, Label>> = {
	peak_power: of('Peak power', 'kW', 2),
	peak_power_speed: of('Speed of peak power', 'rev/min', 0),
	peak_torque: of('Peak torque', 'N·m', 1),
	peak_torque_speed: of('Speed of peak torque', 'rev/min', 0),
	peak_power_corrected: of('Peak power, corrected', 'kW', 2),
	peak_torque_corrected: of('Peak torque, corrected', 'N·m', 1),
	correction_factor: of('Correction factor', '', 4),
	bmep_max: of('BMEP, highest', 'kPa', 0),
	bsfc_min: of('BSFC, lowest', 'g/kWh', 1),
	bsfc_at_peak_power: of('BSFC at peak power', 'g/kWh', 1),
	bte_max: fraction('Brake thermal efficiency, best', 2),
	bte_at_peak_power: fraction('Brake thermal efficiency at peak power', 2),
	bte_max_speed: of('Speed of best efficiency', 'rev/min', 0),
	bte_max_bmep: of('BMEP at best efficiency', 'kPa', 0),
	fuel_flow_max: of('Fuel flow, highest', 'kg/h', 2),
	fuel_energy_flow_max: of('Fuel energy flow, highest', 'MJ/h', 0),
	air_flow_max: of('Air flow, highest', 'kg/h', 1),
	lambda_flow_min: of('Lambda by flow, lowest', '', 3),
	lambda_flow_max: of('Lambda by flow, highest', '', 3),
	lambda_flow_at_peak_power: of('Lambda by flow at peak power', '', 3),
	lambda_sensor_at_peak_power: of('Lambda by sensor at peak power', '', 3),
	lambda_exhaust_at_peak_power: of('Lambda by exhaust gas at peak power', '', 3),
	ve_inlet_max: fraction('Volumetric efficiency, inlet, highest'),
	ve_manifold_max: fraction('Volumetric efficiency, manifold, highest'),
	manifold_pressure_max: of('Manifold pressure, highest', 'kPa', 1),
	manifold_temp_max: of('Manifold temperature, highest', '°C', 1),
	inlet_over_ambient_min: of('Inlet over ambient, lowest', 'K', 1),
	exhaust_temp_max: of('Exhaust temperature, highest', '°C', 0),
	coolant_temp_max: of('Coolant temperature, highest', '°C', 1),
	oil_temp_max: of('Oil temperature, highest', '°C', 1),
	oil_pressure_min: of('Oil pressure, lowest', 'kPa', 0),
	fuel_used_mass: of('Fuel used', 'kg', 3),
	fuel_used_energy: of('Fuel energy used', 'MJ', 2),
	work_done: of('Work done', 'MJ', 2),
	bte_cycle: fraction('Brake thermal efficiency, whole run', 2),
	bsfc_cycle: of('BSFC, whole run', 'g/kWh', 1),
	electrical_energy_out: of('Electrical energy out', 'MJ', 3),
	electrical_energy_in: of('Electrical energy in', 'MJ', 3),
	electrical_power_max: of('Electrical power, highest', 'kW', 1),
	electrical_store_swing: of('Electrical store swing', 'MJ', 3),
	combined_power_max: of('Combined power, highest', 'kW', 1),
	duration: of('Duration', 's', 1),
	engine_hours: of('Engine hours', 'h', 2),
	rows: of('Rows', '', 0),
	sample_rate: of('Sample rate', 'Hz', 1)
};

/** Where a chooser lists a figure. The groups and what stands in them, in order; a code that is in none is a channel's. */
const METRIC_GROUPS: Readonly<Record<string, readonly string[]>> = {
	'Power and torque': [
		'peak_power',
		'peak_power_speed',
		'peak_torque',
		'peak_torque_speed',
		'peak_power_corrected',
		'peak_torque_corrected',
		'correction_factor',
		'bmep_max'
	],
	'Efficiency and fuel': [
		'bsfc_min',
		'bsfc_at_peak_power',
		'bte_max',
		'bte_at_peak_power',
		'bte_max_speed',
		'bte_max_bmep',
		'fuel_flow_max',
		'fuel_energy_flow_max'
	],
	'Air and mixture': [
		'air_flow_max',
		'lambda_flow_min',
		'lambda_flow_max',
		'lambda_flow_at_peak_power',
		'lambda_sensor_at_peak_power',
		'lambda_exhaust_at_peak_power',
		've_inlet_max',
		've_manifold_max'
	],
	'Pressures and temperatures': [
		'manifold_pressure_max',
		'manifold_temp_max',
		'inlet_over_ambient_min',
		'exhaust_temp_max',
		'coolant_temp_max',
		'oil_temp_max',
		'oil_pressure_min'
	],
	'Whole run': [
		'fuel_used_mass',
		'fuel_used_energy',
		'work_done',
		'bte_cycle',
		'bsfc_cycle',
		'duration',
		'engine_hours',
		'rows',
		'sample_rate'
	],
	Electrical: [
		'electrical_energy_out',
		'electrical_energy_in',
		'electrical_power_max',
		'electrical_store_swing',
		'combined_power_max'
	]
};

/** The chooser's group of a metric: `Efficiency and fuel`. */
export const metricGroup = (code: string): string =>
	Object.entries(METRIC_GROUPS).find(([, codes]) => codes.includes(code))?.[0] ?? 'Channels';

/** Every metric code in the order in which figures are listed. */
export const METRIC_CODES: readonly string[] = Object.keys(METRICS);

const FRACTION_CHANNELS = new Set(['bte', 've_inlet', 've_manifold']);

/** Decimals of a channel's single sample; the rest have one. */
const CHANNEL_DECIMALS: Readonly<Record<string, number>> = {
	time: 2,
	speed: 0,
	fuel_flow: 2,
	fuel_flow_volume: 2,
	lambda_sensor: 3,
	lambda_flow: 3,
	lambda_exhaust: 3,
	afr: 2,
	afr_sensor: 2,
	vapour_pressure: 2,
	bmep: 0,
	exhaust_temp: 0,
	fuel_energy_flow: 0,
	turbo_speed: 0,
	hc: 0,
	nox: 0,
	co: 2,
	co2: 2,
	electrical_energy_net: 3,
	bte: 2,
	knock: 2
};

const FUEL: Readonly<Record<FuelPropertyName, Label>> = {
	lhvMjKg: of('Net heating value', 'MJ/kg', 2),
	densityKgM3: of('Density at 15 °C', 'kg/m³', 1),
	afrStoich: of('Stoichiometric air-fuel ratio', '', 2),
	hydrogenCarbonRatio: of('Hydrogen to carbon, molar', '', 3),
	oxygenCarbonRatio: of('Oxygen to carbon, molar', '', 3),
	oxygenMassPct: of('Oxygen by mass', '%', 2),
	ron: of('Research octane number', '', 1),
	expansionPerK: of('Expansion', '1/K', 5)
};

/** Columns that points have beside channels and metrics. */
const POINTS: Readonly<Record<string, Label>> = {
	n: of('Samples', '', 0),
	time_from: of('From', 's', 1),
	time_to: of('To', 's', 1),
	power_corrected: of('Power, corrected', 'kW', 2),
	torque_corrected: of('Torque, corrected', 'N·m', 1)
};

/**
 * How a channel, metric or fuel property is written. A code that none of them knows is a column kept under its own
 * header: written as it is, in the unit given.
 */
export function labelOf(code: string, unit = ''): Label {
	const known = METRICS[code] ?? POINTS[code] ?? (FUEL as Readonly<Record<string, Label>>)[code];
	if (known) return known;
	const part = /^(raw_max|raw_min|sd|cov)_(.+)$/.exec(code);
	if (part?.[1] && part[2]) return partLabel(part[1], labelOf(part[2], unit));
	const channel = channelOf(code);
	if (!channel) return of(code, printedUnit(unit), 2);
	const { base, index } = splitCode(code);
	const label = index === null ? channel.label : `${channel.label} ${index}`;
	if (FRACTION_CHANNELS.has(base)) return fraction(label, CHANNEL_DECIMALS[base] ?? 1);
	return of(label, printedUnit(channel.unit), CHANNEL_DECIMALS[base] ?? 1);
}

/** What is told of a channel beside its mean. */
function partLabel(part: string, whole: Label): Label {
	if (part === 'cov') return fraction(`${whole.label}, coefficient of variation`, 2);
	if (part === 'sd')
		return { ...whole, label: `${whole.label}, standard deviation`, decimals: whole.decimals + 1 };
	return { ...whole, label: `${whole.label}, ${part === 'raw_min' ? 'lowest' : 'highest'} single sample` };
}

/** A stored unit as text beside a number: the dash of a pure number vanishes. */
function printedUnit(unit: string): string {
	return /^[-–]?$|^1$/.test(unit) ? '' : unit;
}
