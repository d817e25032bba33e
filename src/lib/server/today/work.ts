import { formatCount } from '$lib/domain/display/format';
import {
	lateMinutes,
	overrunMinutes,
	plusMinutes,
	progressOf,
	recordNeeds,
	waitsMinutes,
	type Interval,
	type Need
} from '$lib/domain/scheduling';
import type { Booking } from '../bookings';
import type { Schedule } from '../schedule';
import type { Work } from './schemas';
import type { BoardRun } from './select';

export type Entry = Schedule['cells'][number]['entries'][number];

export const spanOf = ({ from, to }: { from: string; to: string }): Interval => ({
	from: new Date(from),
	to: new Date(to)
});

/** From when an entry takes the cell: a booking with its rig-up; taken time has it in it already. */
export const occupiedFrom = (entry: Entry): Date =>
	entry.kind === 'booking' ? plusMinutes(new Date(entry.from), -entry.rigUpMinutes) : new Date(entry.from);

export const isHeld = (entry: Entry): boolean => entry.kind !== 'booking' || entry.state !== 'requested';

const RECORD_WORDS: Record<Need, (run: string) => string> = {
	no_record: () => 'No record opened',
	no_trace: (run) => `Trace of ${run} not uploaded`,
	needs_map: (run) => `Trace of ${run} asks for a channel map`
};

const checksNeeded = ({ openChecks, view }: BoardRun) =>
	openChecks > 0
		? [
				{
					code: 'checklist_open',
					message: `Checklist of ${view.number}: ${formatCount(openChecks, 'item')} not answered`
				}
			]
		: [];

function needsOf(booking: Booking | null, runs: readonly BoardRun[], now: Date): Work['needs'] {
	const slot = booking ? spanOf(booking) : null;
	const isAhead = slot !== null && slot.to > now;
	const record = runs.length
		? runs.flatMap((run) =>
				[
					...checksNeeded(run),
					...recordNeeds(slot, [run], now).map((code) => ({
						code,
						message: RECORD_WORDS[code](run.view.number)
					}))
				].map((need) => ({ ...need, run: run.view.number }))
			)
		: recordNeeds(slot, [], now).map((code) => ({ code, message: RECORD_WORDS[code](''), run: null }));
	return [
		...(isAhead ? booking!.warnings.map((warning) => ({ ...warning, run: null })) : []),
		// A record names its batch; only a slot without one is asked for it.
		...(isAhead && !booking!.fuelBatch && runs.length === 0
			? [{ code: 'fuel_not_chosen', message: 'Fuel batch not chosen', run: null }]
			: []),
		...record
	];
}

/** A run without a slot. */
export function workOfRun(run: BoardRun, now: Date): Work {
	return {
		booking: null,
		runs: [run.view],
		from: run.view.from,
		to: null,
		...progressOf({ from: run.startedAt, to: null }, now),
		lateMinutes: 0,
		overrunMinutes: 0,
		affects: null,
		needs: needsOf(null, [run], now)
	};
}

/** @param entries the day's entries of its cell, to find who comes after it */
export function workOfBooking(
	booking: Booking,
	runs: readonly BoardRun[],
	entries: readonly Entry[],
	now: Date
): Work {
	const slot = {
		...spanOf(booking),
		rigUpMinutes: booking.rigUpMinutes,
		rigDownMinutes: booking.rigDownMinutes
	};
	const late = lateMinutes(slot, runs, now);
	const over = overrunMinutes(slot, runs, now);
	const following = entries.find((entry) => isHeld(entry) && new Date(entry.from) >= slot.to);
	return {
		booking,
		runs: runs.map(({ view }) => view),
		from: booking.from,
		to: booking.to,
		...progressOf(slot, now),
		lateMinutes: late,
		overrunMinutes: over,
		affects:
			following && (late || over)
				? {
						kind: following.kind,
						number: following.kind === 'booking' ? following.number : null,
						client: following.kind === 'booking' ? following.client : null,
						occupiedFrom: occupiedFrom(following).toISOString(),
						waitsMinutes: waitsMinutes(slot, { occupiedFrom: occupiedFrom(following) }, late > 0, now)
					}
				: null,
		needs: needsOf(booking, runs, now)
	};
}
