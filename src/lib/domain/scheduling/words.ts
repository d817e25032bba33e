import { DateTime } from 'luxon';
import type { Interval } from './intervals';

const DAY = 'ccc d LLL yyyy';

/** Clock of that zone; in the hour that it reads twice the offset says which. */
function clock(at: DateTime): string {
	return at.toFormat(at.getPossibleOffsets().length > 1 ? "HH:mm 'UTC'ZZ" : 'HH:mm');
}

/** One instant on the lab's wall clock, e.g. `Mon 7 Dec 2026 08:00`. */
export function instantInWords(at: Date, zone: string): string {
	const local = DateTime.fromJSDate(at, { zone }).setLocale('en-GB');
	return `${local.toFormat(DAY)} ${clock(local)}`;
}

/** A stretch on the lab's wall clock, the day said once: `from Mon 7 Dec 2026 08:00 to 12:00`. */
export function spanInWords({ from, to }: Interval, zone: string): string {
	const start = DateTime.fromJSDate(from, { zone }).setLocale('en-GB');
	const end = DateTime.fromJSDate(to, { zone }).setLocale('en-GB');
	const sameDay = start.hasSame(end, 'day');
	return `from ${instantInWords(from, zone)} to ${sameDay ? clock(end) : instantInWords(to, zone)}`;
}

/** `2 h 30 min`, `45 min`, `3 d 4 h`; minutes are whole, rounded up. */
export function minutesInWords(minutes: number): string {
	const whole = Math.ceil(minutes);
	const parts = [
		[Math.floor(whole / 1440), 'd'],
		[Math.floor((whole % 1440) / 60), 'h'],
		[whole % 60, 'min']
	] as const;
	const said = parts.filter(([n]) => n > 0).map(([n, unit]) => `${n} ${unit}`);
	return said.length ? said.join(' ') : '0 min';
}
