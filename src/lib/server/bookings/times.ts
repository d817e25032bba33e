import { minutesOf, type Interval } from '$lib/domain/scheduling';
import { wrongField } from '../problem';

const DAY_MINUTES = 24 * 60;
const LONGEST_BOOKING_DAYS = 31;
const LONGEST_CLOSURE_DAYS = 366;
const FURTHEST_DAYS = 5 * 366;

interface Rules {
	now: Date;
	longestDays: number;
	/** Entering what has happened already. */
	pastAllowed?: boolean | undefined;
}

function requireTimes(span: Interval, { now, longestDays, pastAllowed }: Rules): void {
	if (span.to <= span.from) throw wrongField('to', 'must be later than from.');
	if (minutesOf(span) > longestDays * DAY_MINUTES)
		throw wrongField('to', `must be within ${longestDays} days of from.`);
	if (minutesOf({ from: now, to: span.to }) > FURTHEST_DAYS * DAY_MINUTES)
		throw wrongField('to', 'lies more than five years ahead. Check the year.');
	if (!pastAllowed && span.to <= now)
		throw wrongField('to', 'lies in the past. A slot can only be asked for ahead of its end.');
}

/** @throws Problem 400 at the field */
export function requireBookingTimes(span: Interval, now: Date, pastAllowed = false): void {
	requireTimes(span, { now, longestDays: LONGEST_BOOKING_DAYS, pastAllowed });
}

/** @throws Problem 400 at the field */
export function requireClosureTimes(span: Interval, now: Date): void {
	requireTimes(span, { now, longestDays: LONGEST_CLOSURE_DAYS });
}
