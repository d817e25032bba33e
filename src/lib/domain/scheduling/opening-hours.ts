import { DateTime } from 'luxon';
import { mergeIntervals, type Interval } from './intervals';

/** One stretch of a week on the lab's wall clock: ISO weekday 1–7 (1 = Monday), `07:30`, up to `24:00`. */
export interface OpeningHour {
	day: number;
	from: string;
	to: string;
}

/**
 * The instant at which a lab's wall clock reads `clock` on that day. In the hour that a zone repeats, the first reading opens
 * and the last one closes; a reading that the spring jump leaves out is taken as the jump itself.
 */
function instantAt(midnight: DateTime, clock: string, end: 'opens' | 'closes'): Date {
	const [hour, minute] = clock.split(':').map(Number) as [number, number];
	if (hour === 24) return midnight.plus({ days: 1 }).startOf('day').toJSDate();
	const read = midnight.set({ hour, minute });
	if (read.hour !== hour || read.minute !== minute) {
		let jump = read;
		while (jump.minus({ minutes: 1 }).offset === jump.offset) jump = jump.minus({ minutes: 1 });
		return jump.toJSDate();
	}
	const readings = read.getPossibleOffsets();
	return (end === 'opens' ? readings[0] : readings.at(-1))!.toJSDate();
}

/**
 * When a cell is open within a stretch of time, as instants in order; `null` hours = always.
 * A day that a zone's clock change makes 23 or 25 hours long is that long here too.
 */
export function openIntervals(
	hours: readonly OpeningHour[] | null,
	within: Interval,
	zone: string
): Interval[] {
	if (hours === null) return within.to > within.from ? [within] : [];
	const open: Interval[] = [];
	const last = DateTime.fromJSDate(within.to, { zone });
	let midnight = DateTime.fromJSDate(within.from, { zone }).startOf('day');
	for (; midnight <= last; midnight = midnight.plus({ days: 1 }).startOf('day'))
		for (const hour of hours)
			if (hour.day === midnight.weekday)
				open.push({
					from: instantAt(midnight, hour.from, 'opens'),
					to: instantAt(midnight, hour.to, 'closes')
				});
	return mergeIntervals(
		open.map(({ from, to }) => ({
			from: from < within.from ? within.from : from,
			to: to > within.to ? within.to : to
		}))
	);
}
