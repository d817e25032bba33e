import ical, { ICalAttendeeStatus, ICalCalendarMethod, ICalEventStatus } from 'ical-generator';
import { z } from 'zod';
import { oneLine } from './text';

/** What a calendar entry says. Whom it is for is added when it is sent, as the address is only known then. */
export const CalendarFacts = z.object({
	/** The same through every move of a slot. */
	bookingId: z.uuid(),
	/** Rises with every change, so that a late mail cannot undo a newer one. */
	sequence: z.number().int(),
	from: z.coerce.date(),
	to: z.coerce.date(),
	summary: z.string(),
	location: z.string(),
	description: z.string(),
	url: z.string()
});
export type CalendarFacts = z.output<typeof CalendarFacts>;
export type CalendarMethod = 'REQUEST' | 'CANCEL';

interface Mailbox {
	name: string;
	email: string;
}

/** A name as a quoted parameter: RFC 5545 has no way to write a double quote in one, and the library's backslash is none. */
const quotable = ({ name }: Mailbox) => oneLine(name).replaceAll('"', '’').replaceAll('\\', '/');

/** An iTIP message (RFC 5546) about one slot, times in UTC. The slot is theirs already, so no reply is asked for. */
export function calendarText(
	facts: CalendarFacts,
	method: CalendarMethod,
	host: string,
	organizer: Mailbox,
	attendee: Mailbox,
	stampedAt: Date
): string {
	const calendar = ical({ prodId: { company: 'Trunnion', product: 'Bookings', language: 'EN' } });
	calendar.method(ICalCalendarMethod[method]);
	calendar.createEvent({
		id: `booking-${facts.bookingId}@${host}`,
		sequence: facts.sequence,
		stamp: stampedAt,
		start: facts.from,
		end: facts.to,
		summary: oneLine(facts.summary),
		location: oneLine(facts.location),
		description: facts.description,
		url: facts.url,
		status: method === 'CANCEL' ? ICalEventStatus.CANCELLED : ICalEventStatus.CONFIRMED,
		organizer: { name: quotable(organizer), email: organizer.email },
		attendees: [
			{
				name: quotable(attendee),
				email: attendee.email,
				rsvp: false,
				status: ICalAttendeeStatus.ACCEPTED
			}
		]
	});
	return calendar.toString();
}
