import type { Finding } from '../model';
import { atS, figure } from './spans';
import type { TraceColumn } from './trace';

interface Run {
	from: number;
	to: number;
	value: number;
	length: number;
}

/** Stretches of one and the same value over the known samples, told by their lengths; only long ones are kept whole. */
interface Runs {
	count: number;
	/** How many stretches have each length up to `LENGTHS`; longer ones are counted with the last. */
	lengths: Uint32Array;
	longest: Run;
	long: Run[];
	lo: number;
	hi: number;
}

const LENGTHS = 4096;
const LONG = 10;
const MOST_LONG = 10_000;

function runsOf(values: Float64Array): Runs | null {
	const runs: Runs = {
		count: 0,
		lengths: new Uint32Array(LENGTHS + 1),
		longest: { from: 0, to: 0, value: NaN, length: 0 },
		long: [],
		lo: Infinity,
		hi: -Infinity
	};
	let [from, last, length, value] = [-1, -1, 0, NaN];
	const close = () => {
		runs.count++;
		runs.lengths[Math.min(length, LENGTHS)]!++;
		if (value < runs.lo) runs.lo = value;
		if (value > runs.hi) runs.hi = value;
		if (length > runs.longest.length) runs.longest = { from, to: last, value, length };
		if (length >= LONG && runs.long.length < MOST_LONG) runs.long.push({ from, to: last, value, length });
	};
	for (let i = 0; i < values.length; i++) {
		const next = values[i]!;
		if (next !== next) continue;
		if (next !== value) {
			if (length > 0) close();
			from = i;
			length = 0;
			value = next;
		}
		last = i;
		length++;
	}
	if (length > 0) close();
	return runs.count > 0 ? runs : null;
}

/** Length that the given share of the stretches, the longest left out, does not exceed. */
function lengthAt({ lengths, count, longest }: Runs, share: number): number {
	let left = share * (count - 1);
	for (let length = 1; length <= LENGTHS; length++) {
		left -= lengths[length]! - (Math.min(longest.length, LENGTHS) === length ? 1 : 0);
		if (left <= 0) return length;
	}
	return LENGTHS;
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
	if (!runs || runs.count < 30) return [];
	const { longest } = runs;
	const usual = lengthAt(runs, 0.5);
	const held = time[longest.to]! - time[longest.from]!;
	if (longest.length >= Math.max(LEAST_SAMPLES, 20 * usual, 6 * lengthAt(runs, 0.98)) && held >= LEAST_S)
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

function clipped(column: TraceColumn, runs: Runs, time: Float64Array): Finding[] {
	for (const end of [runs.hi, runs.lo]) {
		const at = runs.long.filter((run) => run.value === end);
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
