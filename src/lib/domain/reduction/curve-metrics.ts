import { channelOf, splitCode } from '../channels/catalogue';
import type { Metrics, MetricValue } from '../model';
import type { PlacedValue, Places } from './places';

const unitOf = (code: string) => channelOf(code)?.unit ?? '';

/** Extremes that are figures of their own: metric code, channel, which end. */
const EXTREMES: readonly (readonly [metric: string, channel: string, sign: 1 | -1])[] = [
	['bmep_max', 'bmep', 1],
	['bsfc_min', 'bsfc', -1],
	['fuel_flow_max', 'fuel_flow', 1],
	['fuel_energy_flow_max', 'fuel_energy_flow', 1],
	['air_flow_max', 'air_flow', 1],
	['lambda_flow_min', 'lambda_flow', -1],
	['lambda_flow_max', 'lambda_flow', 1],
	['ve_inlet_max', 've_inlet', 1],
	['ve_manifold_max', 've_manifold', 1],
	['manifold_pressure_max', 'manifold_pressure', 1],
	['manifold_temp_max', 'manifold_temp', 1],
	['inlet_over_ambient_min', 'inlet_over_ambient', -1],
	['exhaust_temp_max', 'exhaust_temp', 1],
	['coolant_temp_max', 'coolant_temp', 1],
	['oil_temp_max', 'oil_temp', 1],
	['oil_pressure_min', 'oil_pressure', -1]
];

const AT_PEAK_POWER: readonly (readonly [metric: string, channel: string])[] = [
	['bsfc_at_peak_power', 'bsfc'],
	['bte_at_peak_power', 'bte'],
	['lambda_flow_at_peak_power', 'lambda_flow'],
	['lambda_sensor_at_peak_power', 'lambda_sensor'],
	['lambda_exhaust_at_peak_power', 'lambda_exhaust']
];

/** The extreme over a channel and all its numbered twins. */
function extreme(places: Places, base: string, sign: 1 | -1): PlacedValue | null {
	let best: PlacedValue | null = null;
	for (const code of places.codes()) {
		if (splitCode(code).base !== base) continue;
		const found = places.peak(code, sign);
		if (found && (best === null || sign * found.value > sign * best.value)) best = found;
	}
	return best;
}

function metric(found: PlacedValue, unit: string, method: string): MetricValue {
	return { value: found.value, unit, u: found.u, at: found.at, method };
}

/** The figures of a reduced run that are extremes, or values at peak power. Efficiencies are fractions. */
export function curveMetrics(places: Places): Metrics {
	const metrics: Metrics = {};
	const { method } = places;
	const power = places.peak('power', 1);
	const torque = places.peak('torque', 1);
	const bte = places.peak('bte', 1);
	if (power && power.value > 0) {
		metrics['peak_power'] = metric(power, 'kW', method);
		addSpeed(metrics, 'peak_power_speed', power, method);
		for (const [code, channel] of AT_PEAK_POWER) {
			const there = places.valueAt(channel, power);
			if (there)
				metrics[code] = { value: there.value, unit: unitOf(channel), u: there.u, at: power.at, method };
		}
	}
	if (torque && torque.value > 0) {
		metrics['peak_torque'] = metric(torque, 'N·m', method);
		addSpeed(metrics, 'peak_torque_speed', torque, method);
	}
	if (bte) {
		metrics['bte_max'] = metric(bte, '-', method);
		addSpeed(metrics, 'bte_max_speed', bte, method);
		const bmep = places.valueAt('bmep', bte);
		if (bmep) metrics['bte_max_bmep'] = { value: bmep.value, unit: 'kPa', u: bmep.u, at: bte.at, method };
	}
	for (const [code, channel, sign] of EXTREMES) {
		const found = extreme(places, channel, sign);
		if (found) metrics[code] = metric(found, unitOf(channel), method);
	}
	return metrics;
}

function addSpeed(metrics: Metrics, code: string, found: PlacedValue, method: string): void {
	if (found.at.speed === undefined) return;
	metrics[code] = { value: found.at.speed, unit: 'rev/min', u: null, at: found.at, method };
}
