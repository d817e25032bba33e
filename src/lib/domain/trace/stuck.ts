import type { Finding } from '../model';
import { quantile } from '../statistics/moments';
import { atS, figure } from './spans';
import type { TraceColumn } from './trace';

interface Run {
	from: number;
	to: number;
	value: number;
	length: number;
}

/** Stretches of one and the same value over the known samples. */
function runsOf(values: Float64Array): Run[] {
	const runs: Run[] = [];
	let current: Run | null = null;
	for (let i = 0; i < values.length; i++) {
		const value = values[i]!;
		if (Number.isNaN(value)) continue;
		if (current && value === current.value) {
			current.to = i;
			current.length++;
		} else {
			if (current) runs.push(current);
			current = { from: i, to: i, value, length: 1 };
		}
	}
	if (current) runs.push(current);
	return runs;
}

/** Settings and slow room conditions stand still by nature; a full throttle is at its stop. */
const MAY_STAND =
	/^(throttle|barometer|humidity|ambient_temp|vapour_pressure|state_of_charge|ignition_advance|inlet_temp|fuel_temp|knock)(\.|$)/;

const LEAST_S = 2;
const LEAST_SAMPLES = 25;

/**
 * A channel that is alive elsewhere and then holds one value (stuck), or that is cut off at its highest or lowest value
 * again and again (clipped). A channel that is quiet all the time is not suspect.
 */
export function stuckFindings(column: TraceColumn, time: Float64Array): Finding[] {
	if (MAY_STAND.test(column.code)) return [];
	const runs = runsOf(column.values);
	if (runs.length < 30) return [];
	const longest = runs.reduce((a, b) => (b.length > a.length ? b : a));
	const others = runs.filter((run) => run !== longest).map((run) => run.length);
	const usual = quantile(others, 0.5);
	const held = time[longest.to]! - time[longest.from]!;
	if (longest.length >= Math.max(LEAST_SAMPLES, 20 * usual, 6 * quantile(others, 0.98)) && held >= LEAST_S)
		return [
			{
				code: 'stuck',
				severity: 'warning',
				message: `${column.code} stands at exactly ${figure(longest.value)} ${column.unit} from ${atS(time[longest.from]!)} to ${atS(time[longest.to]!)} (${longest.length} samples) though it moves before or after. Check the sensor and its wiring.`,
				spans: [[time[longest.from]!, time[longest.to]!]],
				channel: column.code
			}
		];
	return usual > 1 ? [] : clipped(column, runs, time);
}

function clipped(column: TraceColumn, runs: readonly Run[], time: Float64Array): Finding[] {
	let lo = Infinity;
	let hi = -Infinity;
	for (const run of runs) {
		lo = Math.min(lo, run.value);
		hi = Math.max(hi, run.value);
	}
	for (const end of [hi, lo]) {
		const at = runs.filter((run) => run.value === end && run.length >= 10);
		if (at.length < 2) continue;
		return [
			{
				code: 'clipped',
				severity: 'warning',
				message: `${column.code} is cut off at ${figure(end)} ${column.unit} in ${at.length} stretches, first from ${atS(time[at[0]!.from]!)}. The range of the instrument or of the recorder may be too small.`,
				spans: at.slice(0, 100).map((run) => [time[run.from]!, time[run.to]!]),
				channel: column.code
			}
		];
	}
	return [];
}
