import {
	covers,
	mergeIntervals,
	minutesOf,
	plusMinutes,
	subtractIntervals,
	withRigTime,
	type Interval
} from './intervals';
import { minutesInWords } from './words';

/** What is looked for, and when it may lie. */
export interface Wish {
	durationMinutes: number;
	/** The test itself lies inside this; rigging may stand outside it, but not before `earliestRig`. */
	window: Interval;
	earliestRig: Date;
}

/** A cell as far as time goes. */
export interface CellTime {
	rigUpMinutes: number;
	rigDownMinutes: number;
	/** When it is open, in the searched stretch. */
	open: readonly Interval[];
	/** When it is taken, rigging included. */
	taken: readonly Interval[];
}

export type Fit = { slot: Interval } | { reason: string };

/** People ask for quarters of an hour; every zone's offset of today is a whole number of them. */
const GRID_MINUTES = 15;

function ceilTo(at: Date, minutes: number): Date {
	const step = minutes * 60_000;
	return new Date(Math.ceil(at.getTime() / step) * step);
}

const latest = (a: Date, b: Date): Date => (a > b ? a : b);

/**
 * The earliest slot in one cell, or the sentence that says why there is none. Rigging before and after counts: all of it
 * must lie in opening hours and in free time of cell and build. Starts on the quarter hour where that fits, else on the minute.
 * @param buildTaken when the build stands in any cell, rigging included
 */
export function firstFit(wish: Wish, cell: CellTime, buildTaken: readonly Interval[]): Fit {
	const { rigUpMinutes, rigDownMinutes } = cell;
	const free = subtractIntervals(cell.open, [...cell.taken, ...buildTaken]);
	for (const stretch of free) {
		const earliest = latest(
			latest(plusMinutes(stretch.from, rigUpMinutes), wish.window.from),
			plusMinutes(wish.earliestRig, rigUpMinutes)
		);
		for (const grid of [GRID_MINUTES, 1]) {
			const from = ceilTo(earliest, grid);
			const slot = { from, to: plusMinutes(from, wish.durationMinutes) };
			if (covers(stretch, withRigTime(slot, rigUpMinutes, rigDownMinutes)) && slot.to <= wish.window.to)
				return { slot };
		}
	}
	return { reason: whyNot(wish, cell, buildTaken, free) };
}

function whyNot(
	wish: Wish,
	cell: CellTime,
	buildTaken: readonly Interval[],
	free: readonly Interval[]
): string {
	const rig = cell.rigUpMinutes + cell.rigDownMinutes;
	const needed = wish.durationMinutes + rig;
	const wanted = `${minutesInWords(needed)}${rig ? ` with ${minutesInWords(rig)} of rigging` : ''}`;
	const longest = (list: readonly Interval[]) => Math.max(0, ...list.map(minutesOf));
	if (wish.durationMinutes > minutesOf(wish.window))
		return `the wished time is shorter than the ${minutesInWords(wish.durationMinutes)} asked for`;
	const open = mergeIntervals(cell.open);
	if (!open.length) return 'it is not open in the wished time';
	if (longest(open) < needed)
		return `it is open for ${minutesInWords(longest(open))} at most in one stretch; ${wanted} is needed`;
	const freeOfCell = subtractIntervals(cell.open, cell.taken);
	if (longest(freeOfCell) < needed)
		return freeOfCell.length
			? `its longest free stretch in the wished time is ${minutesInWords(longest(freeOfCell))}; ${wanted} is needed`
			: 'it is taken or closed for all of the wished time';
	if (buildTaken.length && longest(free) < needed)
		return 'the build stands in another cell whenever this one is free';
	return `no free stretch in the wished time holds ${wanted}`;
}
