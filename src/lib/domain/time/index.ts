import { DateTime } from 'luxon';

/** `2026-03-01T08:00`: the lab's wall clock at an instant, as a `datetime-local` field holds it. @param zone IANA name */
export function wallClock(at: Date, zone: string): string {
	return DateTime.fromJSDate(at, { zone }).toFormat("yyyy-MM-dd'T'HH:mm");
}

/**
 * The instants that read `local` on the wall clock of `zone`: one as a rule, none in the hour that a spring change leaves
 * out, two in the hour that an autumn change repeats (the earlier first).
 * @param local `yyyy-MM-ddTHH:mm`, seconds allowed @param zone IANA name
 */
export function instantsAt(local: string, zone: string): Date[] {
	const naive = DateTime.fromISO(local, { zone: 'utc' });
	if (!naive.isValid) return [];
	const offsets = [-1, 1].map((days) => naive.plus({ days }).setZone(zone, { keepLocalTime: false }).offset);
	return [...new Set(offsets)]
		.map((offset) => naive.minus({ minutes: offset }))
		.filter(
			(instant) =>
				instant.setZone(zone).toFormat("yyyy-MM-dd'T'HH:mm:ss") === naive.toFormat("yyyy-MM-dd'T'HH:mm:ss")
		)
		.map((instant) => instant.toJSDate())
		.sort((a, b) => a.getTime() - b.getTime());
}

/** So many days later at the same reading of the wall clock. @param zone IANA name */
export function plusDays(at: Date, days: number, zone: string): Date {
	return DateTime.fromJSDate(at, { zone }).plus({ days }).toJSDate();
}
