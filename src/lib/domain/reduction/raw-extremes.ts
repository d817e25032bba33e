import { channelOf } from '../channels/catalogue';
import type { Metrics } from '../model';
import { highestRow } from './totals';

/** Channels whose highest single sample is kept beside the figure, spikes included. */
const KEPT = [
	'power',
	'torque',
	'fuel_flow',
	'fuel_energy_flow',
	'air_flow',
	'manifold_pressure',
	'exhaust_temp',
	'coolant_temp'
];

/** `raw_max_*`: the highest single sample of the whole trace as it was recorded, with its time. Never a figure, only beside one. */
export function rawExtremes(columns: ReadonlyMap<string, Float64Array>, time: Float64Array | null): Metrics {
	const metrics: Metrics = {};
	const speed = columns.get('speed');
	for (const code of KEPT) {
		const values = columns.get(code);
		const at = values ? highestRow(values) : -1;
		if (!values || at < 0) continue;
		const rpm = speed?.[at] ?? NaN;
		metrics[`raw_max_${code}`] = {
			value: values[at]!,
			unit: channelOf(code)?.unit ?? '',
			u: null,
			at: { ...(time ? { time: time[at]! } : {}), ...(Number.isNaN(rpm) ? {} : { speed: rpm }) },
			method: 'raw-sample.1'
		};
	}
	return metrics;
}
