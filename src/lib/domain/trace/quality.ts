import { channelOf } from '../channels/catalogue';
import type { Finding } from '../model';
import { findSpikes } from './spikes';
import { atS, figure, spansWhere } from './spans';
import { stuckFindings } from './stuck';
import type { Trace, TraceColumn } from './trace';

export interface SampleChecks {
	findings: Finding[];
	/** Rows of spikes by channel: left out of the reduction, kept for limits. */
	spikes: Map<string, readonly number[]>;
}

const OFF_ZERO_SHARE = 1e-3;

/** What an engine's controls really do within a few samples: pulses and steps, not faults of the recorder. */
const MAY_JUMP = /^(throttle|ignition_advance|knock|electrical_power|battery_voltage|battery_current)(\.|$)/;

function spikeFinding(column: TraceColumn, spikes: readonly number[], time: Float64Array): Finding {
	const set = new Set(spikes);
	const first = spikes[0]!;
	return {
		code: 'spike',
		severity: 'warning',
		message: `${column.code} jumps for ${spikes.length === 1 ? 'one sample' : `${spikes.length} samples`}, first to ${figure(column.values[first]!)} ${column.unit} at ${atS(time[first]!)}. Left out of the figures, kept for the limits.`,
		spans: spansWhere(time, (i) => set.has(i), time.length),
		channel: column.code
	};
}

function impossible(column: TraceColumn, time: Float64Array | null, rowNumbers: Uint32Array): Finding[] {
	const range = channelOf(column.code)?.possible;
	if (!range) return [];
	const [lo, hi] = range;
	// A zero that sits a little off (a speed at standstill) is not impossible.
	const slack = OFF_ZERO_SHARE * (hi - lo);
	const out = (i: number) => column.values[i]! < lo - slack || column.values[i]! > hi + slack;
	let count = 0;
	let first = -1;
	let worst = NaN;
	for (let i = 0; i < column.values.length; i++) {
		if (!out(i)) continue;
		count++;
		if (first < 0) first = i;
		const value = column.values[i]!;
		if (Number.isNaN(worst) || Math.abs(value) > Math.abs(worst)) worst = value;
	}
	if (count === 0) return [];
	const where = time ? `at ${atS(time[first]!)}` : `in row ${rowNumbers[first]}`;
	return [
		{
			code: 'outside_possible',
			severity: 'warning',
			message: `${column.code} reads up to ${figure(worst)} ${column.unit} in ${count} of ${column.values.length} rows, first ${where}; possible is ${figure(lo)} to ${figure(hi)}. The unit or the sensor is probably wrong.`,
			spans: spansWhere(time, out, column.values.length),
			channel: column.code
		}
	];
}

/**
 * Checks the samples of every canonical channel by themselves: spikes, stuck or clipped values, values that cannot be.
 * What a column under its own header may do is not known, so it is left alone.
 */
export function checkSamples(trace: Trace): SampleChecks {
	const findings: Finding[] = [];
	const spikes = new Map<string, readonly number[]>();
	for (const column of trace.columns) {
		findings.push(...impossible(column, trace.time, trace.rowNumbers));
		if (!trace.time || !channelOf(column.code)) continue;
		const found = MAY_JUMP.test(column.code) ? [] : findSpikes(column.values);
		if (found.length > 0) {
			spikes.set(column.code, found);
			findings.push(spikeFinding(column, found, trace.time));
		}
		findings.push(...stuckFindings(column, trace.time));
	}
	return { findings, spikes };
}
