import { dayText } from '$lib/domain/display/clock';

/** Reckoning on the lab's wall clock, `yyyy-MM-ddTHH:mm`, as the calendar draws it; instants are made of it on the server. */
const MINUTE_MS = 60_000;

/** That many minutes later on the clock's face. */
export const laterOnTheWall = (local: string, minutes: number): string =>
	new Date(Date.parse(`${local}Z`) + minutes * MINUTE_MS).toISOString().slice(0, 16);

/** `09:00`. */
const clockOf = (local: string) => local.slice(11, 16);
const dayOf = (local: string) => dayText(`${local}Z`, 'UTC');

/** `Tue 8 Dec 2026, 09:00–14:00`; the day of the end only where it is another. */
export function wallText(from: string, to: string): string {
	const start = `${dayOf(from)}, ${clockOf(from)}`;
	return from.slice(0, 10) === to.slice(0, 10)
		? `${start}–${clockOf(to)}`
		: `${start} – ${dayOf(to)}, ${clockOf(to)}`;
}
