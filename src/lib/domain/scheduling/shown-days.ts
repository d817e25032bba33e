import { DateTime } from 'luxon';

export const SCHEDULE_VIEWS = ['day', 'week'] as const;
export type ScheduleView = (typeof SCHEDULE_VIEWS)[number];

/** The days that a schedule shows, as days of the lab (`2026-03-02`). */
export interface ShownDays {
	view: ScheduleView;
	first: string;
	/** The first day that is not shown any more. */
	end: string;
	/** The day that was asked for; the first of the week may lie before it. */
	day: string;
	today: string;
	/** A day of the stretch before, and of the one after. */
	previous: string;
	next: string;
}

/**
 * A day, or the week from Monday that it lies in.
 * @param day `yyyy-MM-dd`; today when it is none
 * @param zone IANA name of the lab's zone
 */
export function shownDays(view: ScheduleView, day: string, now: Date, zone: string): ShownDays {
	const today = DateTime.fromJSDate(now, { zone }).startOf('day');
	const at = isDay(day) ? DateTime.fromISO(day, { zone }) : today;
	const first = view === 'week' ? at.startOf('week') : at;
	const text = (date: DateTime) => date.toFormat('yyyy-MM-dd');
	const step = view === 'week' ? { weeks: 1 } : { days: 1 };
	return {
		view,
		first: text(first),
		end: text(first.plus(step)),
		day: text(at),
		today: text(today),
		previous: text(at.minus(step)),
		next: text(at.plus(step))
	};
}

/** Whether it is a day of the calendar, in a year of four digits. */
export function isDay(text: string): boolean {
	return /^\d{4}-\d\d-\d\d$/.test(text) && DateTime.fromISO(text, { zone: 'utc' }).isValid;
}

/** `+01:00`: how far the clock of `zone` is ahead of UTC at an instant. */
export const offsetText = (at: Date, zone: string): string =>
	DateTime.fromJSDate(at, { zone }).toFormat('ZZ');
