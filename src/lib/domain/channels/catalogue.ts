import { DIMENSIONS, type Dimension } from '../units/dimensions';

/** Where on the engine a temperature or pressure is taken. */
type Station = 'ambient' | 'inlet' | 'boost' | 'manifold' | 'exhaust';

export interface Channel {
	code: string;
	label: string;
	dimension: Dimension;
	/** The unit its values are kept in. */
	unit: string;
	/** Physically possible range in that unit; outside it the reading, its unit or its column is wrong. */
	possible: readonly [lo: number, hi: number];
	station: Station | null;
	/** May occur several times as `code.1`, `code.2` … */
	indexable: boolean;
	/** Computed from others per sample, not expected as a column (a column of that name is still read). */
	derived: boolean;
}

type Extra = Partial<Pick<Channel, 'unit' | 'station' | 'indexable' | 'derived'>>;
const channel = (
	code: string,
	label: string,
	dimension: Dimension,
	possible: readonly [number, number],
	extra: Extra = {}
): Channel => ({
	code,
	label,
	dimension,
	unit: DIMENSIONS[dimension].unit,
	possible,
	station: null,
	indexable: true,
	derived: false,
	...extra
});

const once = { indexable: false } as const;
const derived = { indexable: false, derived: true } as const;

const CHANNELS: readonly Channel[] = [
	channel('time', 'Time', 'time', [0, 1e9], once),
	channel('speed', 'Engine speed', 'rotational_speed', [0, 30_000], once),
	channel('torque', 'Torque', 'torque', [-50_000, 50_000], once),
	channel('power', 'Brake power', 'power', [-10_000, 20_000], once),
	channel('throttle', 'Throttle', 'percent', [-5, 105], once),
	channel('fuel_flow', 'Fuel flow', 'mass_flow', [-5, 5_000]),
	channel('fuel_flow_volume', 'Fuel flow, by volume', 'volume_flow', [-5, 6_000]),
	channel('air_flow', 'Air flow', 'mass_flow', [-50, 100_000]),
	channel('air_flow_volume', 'Air flow, by volume', 'volume_flow', [-50, 100_000], { unit: 'm³/h' }),
	channel('lambda_sensor', 'Lambda, by sensor', 'ratio', [0.4, 40]),
	channel('afr_sensor', 'Air-fuel ratio, by sensor', 'ratio', [3, 600]),
	channel('manifold_pressure', 'Manifold pressure', 'pressure', [5, 800], { station: 'manifold' }),
	channel('manifold_temp', 'Manifold temperature', 'temperature', [-50, 300], { station: 'manifold' }),
	channel('inlet_pressure', 'Inlet pressure', 'pressure', [40, 130], { station: 'inlet' }),
	channel('inlet_temp', 'Inlet temperature', 'temperature', [-50, 80], { station: 'inlet' }),
	channel('boost_pressure', 'Boost pressure', 'pressure', [40, 800], { station: 'boost' }),
	channel('ambient_temp', 'Ambient temperature', 'temperature', [-50, 70], {
		station: 'ambient',
		indexable: false
	}),
	channel('barometer', 'Barometer', 'pressure', [50, 110], { station: 'ambient', indexable: false }),
	channel('humidity', 'Relative humidity', 'percent', [0, 100], { station: 'ambient', indexable: false }),
	channel('vapour_pressure', 'Vapour pressure', 'pressure', [0, 15], {
		station: 'ambient',
		indexable: false
	}),
	channel('coolant_temp', 'Coolant temperature', 'temperature', [-50, 180]),
	channel('oil_temp', 'Oil temperature', 'temperature', [-50, 220]),
	channel('oil_pressure', 'Oil pressure', 'pressure', [0, 2_000]),
	channel('fuel_temp', 'Fuel temperature', 'temperature', [-60, 150]),
	channel('fuel_pressure', 'Fuel pressure', 'pressure', [0, 400_000]),
	channel('exhaust_temp', 'Exhaust temperature', 'temperature', [-50, 1_300], { station: 'exhaust' }),
	channel('exhaust_pressure', 'Exhaust pressure', 'pressure', [40, 800], { station: 'exhaust' }),
	channel('ignition_advance', 'Ignition advance', 'crank_angle', [-60, 90], { unit: '°CA' }),
	channel('knock', 'Knock', 'ratio', [-1e6, 1e6]),
	channel('co2', 'CO2', 'percent', [-1, 25]),
	channel('co', 'CO', 'percent', [-1, 20]),
	channel('o2', 'O2', 'percent', [-1, 25]),
	channel('hc', 'HC', 'concentration', [-500, 200_000]),
	channel('nox', 'NOx', 'concentration', [-100, 20_000]),
	channel('turbo_speed', 'Turbocharger speed', 'rotational_speed', [0, 400_000]),
	channel('vehicle_speed', 'Vehicle speed', 'velocity', [-50, 500], once),
	channel('electrical_power', 'Electrical power', 'power', [-2_000, 2_000], once),
	channel('battery_voltage', 'Store voltage', 'voltage', [0, 1_500]),
	channel('battery_current', 'Store current', 'current', [-5_000, 5_000]),
	channel('state_of_charge', 'State of charge', 'percent', [0, 100]),
	channel('blowby', 'Blow-by', 'volume_flow', [-10, 5_000], { unit: 'L/min' }),
	channel('vibration', 'Vibration', 'velocity', [-2_000, 2_000], { unit: 'mm/s' }),

	channel('bmep', 'BMEP', 'pressure', [-2_000, 6_000], derived),
	channel('fuel_energy_flow', 'Fuel energy flow', 'energy_flow', [0, 250_000], derived),
	channel('afr', 'Air-fuel ratio, by flow', 'ratio', [3, 600], derived),
	channel('lambda_flow', 'Lambda, by flow', 'ratio', [0.3, 40], derived),
	channel('lambda_exhaust', 'Lambda, by exhaust gas', 'ratio', [0.3, 40], derived),
	channel('bsfc', 'BSFC', 'specific_consumption', [0, 5_000], derived),
	channel('bte', 'Brake thermal efficiency', 'ratio', [0, 0.65], derived),
	channel('ve_inlet', 'Volumetric efficiency, inlet', 'ratio', [0, 6], derived),
	channel('ve_manifold', 'Volumetric efficiency, manifold', 'ratio', [0, 2], derived),
	channel('inlet_over_ambient', 'Inlet over ambient', 'temperature', [-60, 250], derived),
	channel('electrical_energy_net', 'Electrical energy, net', 'energy', [-1e6, 1e6], derived),
	channel('combined_power', 'Combined power', 'power', [-10_000, 20_000], derived)
];

/** All canonical channels by code, in the order in which they are offered. */
export const CATALOGUE: ReadonlyMap<string, Channel> = new Map(CHANNELS.map((entry) => [entry.code, entry]));

/** `exhaust_temp.3` → `exhaust_temp`, 3; a plain code has no index. */
export function splitCode(code: string): { base: string; index: number | null } {
	const parts = /^(.+)\.([1-9]\d*)$/.exec(code);
	return parts ? { base: parts[1]!, index: Number(parts[2]) } : { base: code, index: null };
}

/**
 * The catalogue's entry of a code, indexed or not; null for a column kept under its own header, for an unknown code and
 * for an index on what exists once only.
 */
export function channelOf(code: string): Channel | null {
	const { base, index } = splitCode(code);
	const entry = CATALOGUE.get(base);
	return entry && (index === null || entry.indexable) ? entry : null;
}
