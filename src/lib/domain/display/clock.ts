import { formatNumber } from './format';

/**
 * Instants as people read them, on the lab's wall clock whatever clock the reader's machine keeps. Words and order are our own,
 * not the locale data's, so that server and browser print the same.
 */
const DAYS = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'];
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const HOUR_MS = 3_600_000;

const readers = new Map<string, Intl.DateTimeFormat>();

/** What the clock of `zone` reads at `ms`, as if it were UTC. */
function wallMs(ms: number, zone: string): number {
	let reader = readers.get(zone);
	if (!reader) {
		reader = new Intl.DateTimeFormat('en-GB', {
			timeZone: zone,
			hourCycle: 'h23',
			year: 'numeric',
			month: 'numeric',
			day: 'numeric',
			hour: 'numeric',
			minute: 'numeric',
			second: 'numeric'
		});
		readers.set(zone, reader);
	}
	const read = Object.fromEntries(reader.formatToParts(ms).map(({ type, value }) => [type, Number(value)]));
	const { year = 0, month = 1, day = 1, hour = 0, minute = 0, second = 0 } = read;
	return Date.UTC(year, month - 1, day, hour, minute, second);
}

const offsetMs = (ms: number, zone: string) => wallMs(ms, zone) - Math.floor(ms / 1000) * 1000;

/** In the hour that an autumn change repeats, the offset says which of the two is meant. */
function whichOfTwo(ms: number, zone: string): string {
	const own = offsetMs(ms, zone);
	const isRepeated = [ms - 3 * HOUR_MS, ms + 3 * HOUR_MS]
		.map((near) => offsetMs(near, zone))
		.some((other) => other !== own && offsetMs(ms + own - other, zone) === other);
	if (!isRepeated) return '';
	const minutes = Math.abs(own) / 60_000;
	return ` UTC${own < 0 ? '−' : '+'}${two(Math.floor(minutes / 60))}:${two(minutes % 60)}`;
}

/** When the day that begins at this UTC midnight begins on the lab's clock, in ms. */
export const labMidnightMs = (utcMidnightMs: number, zone: string): number =>
	utcMidnightMs - offsetMs(utcMidnightMs, zone);

const two = (part: number) => String(part).padStart(2, '0');
const msOf = (at: Date | string) => (typeof at === 'string' ? Date.parse(at) : at.getTime());

function clockOf(ms: number, zone: string): string {
	const wall = new Date(wallMs(ms, zone));
	return `${two(wall.getUTCHours())}:${two(wall.getUTCMinutes())}${whichOfTwo(ms, zone)}`;
}

/** `Tue 8 Dec 2026`. @param zone IANA name */
export function dayText(at: Date | string, zone: string): string {
	const wall = new Date(wallMs(msOf(at), zone));
	return `${DAYS[wall.getUTCDay()]} ${wall.getUTCDate()} ${MONTHS[wall.getUTCMonth()]} ${wall.getUTCFullYear()}`;
}

/** A plain day of an address, `2026-12-08`, as `8 Dec 2026`; what is none stays as it is. */
export function plainDayText(day: string): string {
	const [, year, month, date] = /^(\d{4})-(\d\d)-(\d\d)$/.exec(day) ?? [];
	const name = MONTHS[Number(month) - 1];
	return name ? `${Number(date)} ${name} ${year}` : day;
}

/** `Tue 8 Dec 2026, 09:00`. @param zone IANA name */
export function momentText(at: Date | string, zone: string): string {
	return `${dayText(at, zone)}, ${clockOf(msOf(at), zone)}`;
}

/** `09:00`. @param zone IANA name */
export const clockText = (at: Date | string, zone: string): string => clockOf(msOf(at), zone);

/** `Tue 8 Dec 2026, 09:00–14:00`; the day of the end only where it is another. @param zone IANA name */
export function slotText(from: Date | string, to: Date | string, zone: string): string {
	const sameDay = dayText(from, zone) === dayText(to, zone);
	return sameDay
		? `${momentText(from, zone)}–${clockOf(msOf(to), zone)}`
		: `${momentText(from, zone)} – ${momentText(to, zone)}`;
}

/** A zone's name as people write it: `Europe/Isle of Man`. */
export const zoneText = (zone: string): string => zone.replaceAll('_', ' ');

/** Whole minutes: `45 min`, `2 h`, `2 h 30 min`. */
export function minutesText(minutes: number): string {
	const [hours, rest] = [Math.floor(minutes / 60), minutes % 60];
	if (hours === 0) return `${rest} min`;
	return rest === 0 ? `${formatNumber(hours, 0)} h` : `${formatNumber(hours, 0)} h ${rest} min`;
}
