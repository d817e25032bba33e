import { splitCode } from '../channels/catalogue';
import { readTable } from '../import/read-table';
import type { TableColumn } from '../import/table';
import { timeUnitBySize } from '../import/time';
import type { RunKind } from '../model';
import { findPlateaus } from '../reduction/plateaus';
import { applyMap } from '../trace/apply-map';
import { checkMap } from '../trace/check-map';
import { missingNeeds, proposeMap, SURE, toMap, type ProposedColumn } from '../trace/propose-map';
import { columnOf, type Trace } from '../trace/trace';
import { parseUnit } from '../units/parse';
import { describeFile } from './describe';

/** What a file tells about its run, for a form to start from; null where it does not tell. */
export interface RunGuess {
	kind: { value: RunKind; why: string } | null;
	/** When the recording began: an instant, or what a wall clock read that says no zone (`yyyy-MM-ddTHH:mm:ss`). */
	start: { instant: Date } | { wallClock: string } | null;
}

/** A held point lasts so long at least before a file is taken for one of points; looser than what the figures ask. */
const HELD = { speedTolerance: 0.01, torqueTolerance: 0.03, settleS: 3, averageS: 5 };
const LEAST_POINTS = 3;
const LEAST_HELD_SHARE = 0.5;
/** A sweep covers at least this much of its highest speed, nearly all of it one way. */
const LEAST_SWEPT_SHARE = 0.25;
const LEAST_ONE_WAY_SHARE = 0.8;
const MOTORED_SHARE = 0.9;
/** From here on a speed counts as turning, rev/min. */
const TURNING_RPM = 100;

const has = (proposal: readonly ProposedColumn[], code: string) =>
	proposal.some(({ guess }) => guess !== null && splitCode(guess).base === code);

/**
 * What can be told of a run from its file before anyone opened a record.
 *
 * @param bytes the file, or its first part
 * @param isWhole whether nothing is left out; the shape of a run can only be told from all of it
 */
export function guessRun(bytes: Uint8Array, isWhole: boolean): RunGuess {
	const read = readTable(bytes);
	if (!read.ok) return { kind: null, start: null };
	const proposal = proposeMap(read.table, 'power_sweep');
	const clock = proposal.find(({ guess }) => guess === 'time');
	const column = read.table.columns.find(({ index }) => index === clock?.index);
	return {
		kind: guessKind(),
		start: clock && column ? guessStart(bytes, column, clock.unit) : null
	};

	function guessKind(): RunGuess['kind'] {
		const known = proposal.map(({ guess }) => guess);
		if (!clock)
			return missingNeeds(known, 'point_table').length === 0
				? { value: 'point_table', why: 'the file has no time column, so its rows are points' }
				: null;
		if (!has(proposal, 'speed') || !(has(proposal, 'torque') || has(proposal, 'power')))
			return { value: 'free_log', why: 'no column is named as both speed and load' };
		const isSure = proposal.every(
			({ ask, guess, confidence }) => !ask && (guess === null || confidence >= SURE)
		);
		if (!isWhole || !isSure || !has(proposal, 'torque')) return null;
		const map = read.ok ? checkMap(read.table, toMap(proposal)) : null;
		return map?.ok && read.ok ? guessShape(applyMap(read.table, map.columns, {}).trace) : null;
	}
}

function guessShape(trace: Trace): RunGuess['kind'] {
	const speed = columnOf(trace, 'speed')?.values;
	const torque = columnOf(trace, 'torque')?.values;
	const { time } = trace;
	if (!speed || !torque || !time || time.length < 3) return null;
	let turning = 0;
	let driven = 0;
	for (let i = 0; i < time.length; i++)
		if (speed[i]! > TURNING_RPM && !Number.isNaN(torque[i]!)) {
			turning++;
			if (torque[i]! < 0) driven++;
		}
	if (turning > 0 && driven >= MOTORED_SHARE * turning)
		return { value: 'motoring', why: 'the torque is below zero nearly all the time' };
	const points = findPlateaus(time, speed, torque, HELD);
	const heldS = points.reduce((sum, { from, to }) => sum + time[to - 1]! - time[from]! + HELD.settleS, 0);
	const lastsS = time[time.length - 1]! - time[0]!;
	if (points.length >= LEAST_POINTS && heldS >= LEAST_HELD_SHARE * lastsS)
		return { value: 'steady_points', why: `speed and load are held at ${points.length} points` };
	return isSwept(time, speed) ? { value: 'power_sweep', why: 'the speed ramps through the file' } : null;
}

/** Whether the means of about a second go mostly one way, and far. */
function isSwept(time: Float64Array, speed: Float64Array): boolean {
	const means: number[] = [];
	let second = NaN;
	let sum = 0;
	let n = 0;
	for (let i = 0; i < time.length; i++) {
		const value = speed[i]!;
		if (Number.isNaN(value)) continue;
		if (Math.floor(time[i]!) !== second && n > 0) {
			means.push(sum / n);
			sum = n = 0;
		}
		second = Math.floor(time[i]!);
		sum += value;
		n++;
	}
	if (n > 0) means.push(sum / n);
	const steps = means.slice(1).map((mean, at) => mean - means[at]!);
	const up = steps.reduce((total, step) => total + Math.max(0, step), 0);
	const down = steps.reduce((total, step) => total + Math.max(0, -step), 0);
	const swept = Math.max(...means) - Math.min(...means);
	return (
		swept >= LEAST_SWEPT_SHARE * Math.max(...means) && Math.max(up, down) >= LEAST_ONE_WAY_SHARE * (up + down)
	);
}

const pad = (part: number) => String(part).padStart(2, '0');
const OFFSET = /(?:Z|[+-]\d{2}:?\d{2})$/;
/** `03/04/2026` is a day in March or in April. */
const EITHER_ORDER = /^(\d{1,2})[/-](\d{1,2})[/-]/;
const wallClockOf = (ms: number) => {
	const at = new Date(ms);
	const day = `${at.getUTCFullYear()}-${pad(at.getUTCMonth() + 1)}-${pad(at.getUTCDate())}`;
	return `${day}T${pad(at.getUTCHours())}:${pad(at.getUTCMinutes())}:${pad(at.getUTCSeconds())}`;
};
/** Day number 25 569 of spreadsheets is 1 January 1970. */
const SPREADSHEET_1970 = 25_569;

function guessStart(bytes: Uint8Array, column: TableColumn, unit: string | null): RunGuess['start'] {
	const first = column.values.find((value) => !Number.isNaN(value));
	if (first === undefined) return null;
	if (column.form === 'date_time') {
		const described = describeFile(bytes);
		const cell = described.ok ? (described.rows[0]?.[column.index] ?? '').trim() : '';
		const either = EITHER_ORDER.exec(cell);
		if (!cell || (either && either[1] !== either[2] && Number(either[1]) <= 12 && Number(either[2]) <= 12))
			return null;
		// A day without an hour is midnight in no one's log.
		if (!cell.includes(':')) return null;
		return OFFSET.test(cell) ? { instant: new Date(first * 1000) } : { wallClock: wallClockOf(first * 1000) };
	}
	if (column.form !== 'number') return null;
	const size = timeUnitBySize(column.values)?.unit;
	const written = parseUnit(unit)?.unit;
	if (size === 's' && first > 9e8 && (unit === null || written === 's'))
		return { instant: new Date(first * 1000) };
	if (size === 'ms' && (unit === null || written === 'ms')) return { instant: new Date(first) };
	return size === 'd' ? { wallClock: wallClockOf((first - SPREADSHEET_1970) * 86_400_000) } : null;
}
