/**
 * The kinds of quantity that a channel or a fuel property can be, and the unit that each is kept in below the
 * edge of the system. `measure` is the same unit as the units library spells it.
 */
export const DIMENSIONS = {
	time: { unit: 's', measure: 's' },
	rotational_speed: { unit: 'rev/min', measure: 'rpm' },
	torque: { unit: 'N·m', measure: 'N*m' },
	power: { unit: 'kW', measure: 'kW' },
	energy_flow: { unit: 'MJ/h', measure: 'MJ/h' },
	energy: { unit: 'MJ', measure: 'MJ' },
	mass: { unit: 'kg', measure: 'kg' },
	mass_flow: { unit: 'kg/h', measure: 'kg/h' },
	volume: { unit: 'L', measure: 'l' },
	volume_flow: { unit: 'L/h', measure: 'l/h' },
	pressure: { unit: 'kPa', measure: 'kPa' },
	temperature: { unit: '°C', measure: 'degC' },
	percent: { unit: '%', measure: '%' },
	ratio: { unit: '-', measure: '1' },
	concentration: { unit: 'ppm', measure: 'ppm' },
	crank_angle: { unit: '°CA', measure: 'deg' },
	specific_consumption: { unit: 'g/kWh', measure: 'g/kW*h' },
	specific_energy: { unit: 'MJ/kg', measure: 'MJ/kg' },
	energy_density: { unit: 'MJ/L', measure: 'MJ/l' },
	density: { unit: 'kg/m³', measure: 'kg/m^3' },
	inertia: { unit: 'kg·m²', measure: 'kg*m^2' },
	voltage: { unit: 'V', measure: 'V' },
	current: { unit: 'A', measure: 'A' },
	velocity: { unit: 'km/h', measure: 'km/h' },
	force: { unit: 'N', measure: 'N' }
} as const satisfies Record<string, { unit: string; measure: string }>;

export type Dimension = keyof typeof DIMENSIONS;

/** Dimensions that measure one physical thing in two customs, so that a value may go from one to the other. */
const FAMILIES: readonly (readonly Dimension[])[] = [
	['power', 'energy_flow'],
	['percent', 'ratio', 'concentration']
];

export function sameKind(a: Dimension, b: Dimension): boolean {
	return a === b || FAMILIES.some((family) => family.includes(a) && family.includes(b));
}
