import { plusMinutes, type Interval } from './intervals';

const MINUTE_MS = 60_000;
/** A slot that has begun without a record is told at once; that it is late, only after the time a last check takes. */
const LATE_AFTER_MINUTES = 10;
/** A record that belongs to no slot has no end to be held against: by then its trace could have come. */
const TRACE_DUE_MINUTES = 60;
/** A record older than this is forgotten rather than running. */
const RUNNING_AT_MOST_MINUTES = 24 * 60;

/** A confirmed slot of a cell, as far as its punctuality goes. */
interface Slot extends Interval {
	rigUpMinutes: number;
	rigDownMinutes: number;
}

/** A run's record, as far as time and what it lacks go. */
export interface Recorded {
	startedAt: Date;
	isOpen: boolean;
	traces: number;
	/** Traces that wait for someone to say what their columns are. */
	unmapped: number;
}

/** Someone's time after this one, rigging included; whose it is does not matter here. */
interface Following {
	occupiedFrom: Date;
}

export type Need = 'no_record' | 'no_trace' | 'needs_map';

const wholeMinutes = (from: Date, to: Date) => Math.floor((to.getTime() - from.getTime()) / MINUTE_MS);

/** Whole minutes since it began and until it is to end; negative once the end has passed. */
export function progressOf(
	{ from, to }: { from: Date; to: Date | null },
	now: Date
): { elapsedMinutes: number; remainingMinutes: number | null } {
	return {
		elapsedMinutes: wholeMinutes(from, now),
		remainingMinutes: to ? -wholeMinutes(to, now) || 0 : null
	};
}

/** Whether an open record is of work that still goes on, not one that nobody closed. */
export function isRunning(run: Recorded, now: Date): boolean {
	return run.isOpen && wholeMinutes(run.startedAt, now) < RUNNING_AT_MOST_MINUTES;
}

/**
 * Minutes by which a slot without any record is late; 0 before it has begun, in the first minutes, and once a record is there.
 */
export function lateMinutes(slot: Interval, runs: readonly Recorded[], now: Date): number {
	if (runs.length > 0 || now >= slot.to) return 0;
	const minutes = wholeMinutes(slot.from, now);
	return minutes > LATE_AFTER_MINUTES ? minutes : 0;
}

/** Minutes for which a record has stayed open past the end of its slot. */
export function overrunMinutes(slot: Interval, runs: readonly Recorded[], now: Date): number {
	return runs.some((run) => isRunning(run, now)) ? Math.max(0, wholeMinutes(slot.to, now)) : 0;
}

/**
 * Minutes that the next in the cell will have to wait for, if the work takes as long as was booked: a late start ends late,
 * an overrun ends now at the earliest, and rig-down comes after. 0 where there is room enough.
 */
export function waitsMinutes(slot: Slot, next: Following, isLate: boolean, now: Date): number {
	const bookedMs = slot.to.getTime() - slot.from.getTime();
	const ends = isLate ? new Date(now.getTime() + bookedMs) : now;
	return Math.max(0, wholeMinutes(next.occupiedFrom, plusMinutes(ends, slot.rigDownMinutes)));
}

/** What work in a cell lacks of its record: without a slot, `slot` is null. */
export function recordNeeds(slot: Interval | null, runs: readonly Recorded[], now: Date): Need[] {
	const needs = new Set<Need>();
	if (slot && runs.length === 0 && slot.from <= now) needs.add('no_record');
	for (const run of runs) {
		const due = slot ? slot.to : plusMinutes(run.startedAt, TRACE_DUE_MINUTES);
		if (run.traces === 0 && (!run.isOpen || due <= now)) needs.add('no_trace');
		if (run.unmapped > 0) needs.add('needs_map');
	}
	return [...needs];
}

/**
 * The stretch of a day that is worth drawing: all that happens and the present, out to full hours.
 * @param day the lab's day, so that nothing of another is drawn
 * @param things opening hours and entries
 */
export function drawnStretch(day: Interval, things: readonly Interval[], now: Date): Interval {
	const hour = 60 * MINUTE_MS;
	const inDay = things.filter(({ from, to }) => to > day.from && from < day.to);
	const froms = [now, ...inDay.map(({ from }) => from)].map(Number);
	const tos = [now, ...inDay.map(({ to }) => to)].map(Number);
	// Counted from the day's own start: a zone may be a fraction of an hour from UTC.
	const start = day.from.getTime();
	const from = start + Math.floor((Math.min(...froms) - start) / hour) * hour;
	const to = start + Math.ceil((Math.max(...tos) - start) / hour) * hour;
	return {
		from: new Date(Math.max(start, from)),
		to: new Date(Math.min(day.to.getTime(), Math.max(to, from + hour)))
	};
}
