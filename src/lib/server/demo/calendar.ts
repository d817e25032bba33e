import { DateTime } from 'luxon';

/**
 * The lab's working days around the day on which the demo lab was begun: 0 is that day, or the Monday after it.
 * @param workday so many working days later (earlier when negative) @param clock at the lab, e.g. `10:20`
 */
export function labTime(begun: Date, zone: string, workday: number, clock: string): Date {
	let day = DateTime.fromJSDate(begun, { zone }).startOf('day');
	while (day.weekday > 5) day = day.plus({ days: 1 });
	const step = Math.sign(workday);
	for (let left = Math.abs(workday); left > 0;) {
		day = day.plus({ days: step });
		if (day.weekday <= 5) left--;
	}
	const [hour, minute] = clock.split(':').map(Number);
	return day.set({ hour: hour!, minute: minute! }).toJSDate();
}

export type Moment =
	| { workday: number; clock: string }
	/** Counted from the quarter of an hour in which the lab was begun, at whatever hour that was. */
	| { minutes: number }
	/** The same where that is in the day's working hours, otherwise the next morning at this clock. */
	| { minutes: number; orAt: string };

const QUARTER_MS = 15 * 60_000;
const MINUTE_MS = 60_000;
/** Who begins later than this gets the next shift tomorrow. */
const [SHIFT_FROM_HOUR, SHIFT_TO_HOUR] = [7, 15];
const MORNING_AHEAD_MS = 3 * 3_600_000;

export function momentOf(begun: Date, zone: string, moment: Moment): Date {
	if ('workday' in moment) return labTime(begun, zone, moment.workday, moment.clock);
	const quarter = Math.floor(begun.getTime() / QUARTER_MS) * QUARTER_MS;
	const at = DateTime.fromJSDate(begun, { zone });
	const inHours = at.weekday <= 5 && at.hour >= SHIFT_FROM_HOUR && at.hour < SHIFT_TO_HOUR;
	if (!('orAt' in moment) || inHours) return new Date(quarter + moment.minutes * MINUTE_MS);
	const early = labTime(begun, zone, 0, moment.orAt);
	return early.getTime() - begun.getTime() > MORNING_AHEAD_MS ? early : labTime(begun, zone, 1, moment.orAt);
}
