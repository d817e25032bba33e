import { electricalEnergy } from '../formulas/electrical';
import { massKg, workMj } from '../formulas/integral';
import type { Metrics } from '../model';

/** A step longer than this many usual steps is a hole in the record and counts nothing. */
const HOLE_STEPS = 5;
/** Faster than this the engine runs and its hours count, rev/min. */
export const RUNNING_RPM = 100;

const INTEGRAL = 'trapezoid.1';
const COUNT = 'count.1';
const SAMPLES = 'sample-max.1';

/**
 * Figures of the whole trace: duration, integrals of fuel and work, electrical energies. Ratios over the run are ratios of
 * integrals.
 *
 * @param time s @param columns canonical channels per sample, spikes left out, with what is derived from them
 * @param stepS usual step of the clock, s @param lhvMjKg net heating value; unknown leaves out energies of the fuel
 */
export function totals(
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>,
	stepS: number,
	lhvMjKg: number | undefined
): Metrics {
	const metrics: Metrics = {};
	const add = (code: string, value: number, unit: string, method: string) => {
		if (Number.isFinite(value)) metrics[code] = { value, unit, u: null, at: null, method };
	};
	const last = time[time.length - 1] ?? 0;
	add('duration', last, 's', COUNT);
	if (stepS > 0) add('sample_rate', 1 / stepS, 'Hz', COUNT);
	const hole = HOLE_STEPS * stepS * (1 + 1e-9);
	const speed = columns.get('speed');
	if (speed) {
		let running = 0;
		for (let i = 1; i < time.length; i++)
			if (speed[i]! > RUNNING_RPM && time[i]! - time[i - 1]! <= hole) running += time[i]! - time[i - 1]!;
		add('engine_hours', running / 3600, 'h', COUNT);
	}
	const [power, fuel] = [columns.get('power'), columns.get('fuel_flow')];
	const fuelKg = fuel ? massKg(time, fuel, hole) : NaN;
	const work = power ? workMj(time, power, hole) : NaN;
	add('fuel_used_mass', fuelKg, 'kg', INTEGRAL);
	add('fuel_used_energy', fuelKg * (lhvMjKg ?? NaN), 'MJ', INTEGRAL);
	add('work_done', work, 'MJ', INTEGRAL);
	if (power && fuel) addCycle(add, time, power, fuel, hole, lhvMjKg);
	addElectrical(metrics, add, time, columns, hole);
	return metrics;
}

/** Consumption and efficiency over the run, over the time in which both power and fuel are known. */
function addCycle(
	add: (code: string, value: number, unit: string, method: string) => void,
	time: Float64Array,
	power: Float64Array,
	fuel: Float64Array,
	hole: number,
	lhvMjKg: number | undefined
): void {
	const both = (values: Float64Array, other: Float64Array) =>
		values.map((value, i) => (Number.isNaN(other[i]!) ? NaN : value));
	const work = workMj(time, both(power, fuel), hole);
	const mass = massKg(time, both(fuel, power), hole);
	if (!(work > 0 && mass > 0)) return;
	add('bsfc_cycle', (1000 * mass) / (work / 3.6), 'g/kWh', INTEGRAL);
	add('bte_cycle', work / (mass * (lhvMjKg ?? NaN)), '-', INTEGRAL);
}

function addElectrical(
	metrics: Metrics,
	add: (code: string, value: number, unit: string, method: string) => void,
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>,
	hole: number
): void {
	const electrical = columns.get('electrical_power');
	if (!electrical) return;
	const energy = electricalEnergy(time, electrical, hole);
	add('electrical_energy_out', energy.outMj, 'MJ', INTEGRAL);
	add('electrical_energy_in', energy.inMj, 'MJ', INTEGRAL);
	add('electrical_store_swing', energy.swingMj, 'MJ', INTEGRAL);
	for (const [code, channel] of [
		['electrical_power_max', 'electrical_power'],
		['combined_power_max', 'combined_power']
	] as const) {
		const values = columns.get(channel);
		const at = values ? highestRow(values) : -1;
		if (values && at >= 0)
			metrics[code] = { value: values[at]!, unit: 'kW', u: null, at: { time: time[at]! }, method: SAMPLES };
	}
}

export function highestRow(values: Float64Array): number {
	let best = -1;
	for (let i = 0; i < values.length; i++)
		if (Number.isFinite(values[i]!) && (best < 0 || values[i]! > values[best]!)) best = i;
	return best;
}
