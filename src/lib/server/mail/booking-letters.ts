import { instantInWords, spanInWords } from '$lib/domain/scheduling';
import type { Trx } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { bookingFacts, slotHistory, type BookingFacts, type SlotHistory } from './booking-facts';
import { CalendarFacts, type CalendarMethod } from './calendar';
import { entitled, managers, type Outgoing } from './outgoing';
import type { Letter } from './text';

type Event = JobData<'mail.notify'>;

/**
 * The mails of a booking's event. They say how the booking stands now, and what a later event has undone is not sent at all.
 * Managers hear of requests; who asked for a slot hears what became of it.
 */
export async function bookingLetters(trx: Trx, deps: Deps, event: Event): Promise<Outgoing[]> {
	const booking = await bookingFacts(trx, event.subjectId);
	if (!booking) return [];
	const { state } = booking;
	switch (event.event) {
		case 'booking.requested':
			return state === 'cancelled' ? [] : toManagers(trx, asked(booking, deps, 'asks for a slot'));
		case 'booking.moved':
			if (state === 'requested') return toManagers(trx, asked(booking, deps, 'asks for another time'));
			return state === 'confirmed' ? movedLetters(trx, deps, booking) : [];
		case 'booking.confirmed':
			if (state !== 'confirmed') return [];
			return toAskers(trx, deps, booking, settled(booking, deps, booking.replaces !== null), 'REQUEST');
		case 'booking.declined':
			return toRequester(trx, booking, declined(booking, deps));
		case 'booking.cancelled':
			return cancelledLetters(trx, deps, booking);
		case 'run.flagged':
			return [];
	}
}

async function toManagers(trx: Trx, letter: Letter): Promise<Outgoing[]> {
	return (await managers(trx)).map((recipientId) => ({ recipientId, letter }));
}

async function toRequester(trx: Trx, booking: BookingFacts, letter: Letter): Promise<Outgoing[]> {
	const people = await entitled(trx, [booking.requestedBy], booking.clientId);
	return people.map((recipientId) => ({ recipientId, letter }));
}

/** To everyone who asked for this slot or for one it took the place of: all of them have it in their calendars. */
async function toAskers(
	trx: Trx,
	deps: Deps,
	booking: BookingFacts,
	letter: Letter,
	method: CalendarMethod,
	history?: SlotHistory
): Promise<Outgoing[]> {
	const slot = history ?? (await slotHistory(trx, booking.id));
	const people = await entitled(trx, slot.requesters, booking.clientId);
	const facts = calendarFacts(booking, slot, deps);
	return people.map((recipientId) => ({ recipientId, letter, calendar: { facts, method } }));
}

/** To those whose calendar has it elsewhere: who was told of neither a move nor its undoing has nothing to learn. */
async function movedLetters(trx: Trx, deps: Deps, booking: BookingFacts): Promise<Outgoing[]> {
	const history = await slotHistory(trx, booking.id);
	const letters = await toAskers(trx, deps, booking, settled(booking, deps, true), 'REQUEST', history);
	const told = await trx
		.selectFrom('mail')
		.select(['recipientId', 'calendar'])
		.where('subjectId', 'in', history.bookingIds)
		.where('calendarMethod', '=', 'REQUEST')
		.orderBy('createdAt')
		.orderBy('revision')
		.execute();
	const placeOf = ({ from, to, location }: CalendarFacts) => `${location} ${+from} ${+to}`;
	const known = new Map(
		told.map((row) => [row.recipientId, placeOf(CalendarFacts.parse(JSON.parse(row.calendar!)))])
	);
	return letters.filter(
		({ recipientId, calendar }) => !calendar || known.get(recipientId) !== placeOf(calendar.facts)
	);
}

async function cancelledLetters(trx: Trx, deps: Deps, booking: BookingFacts): Promise<Outgoing[]> {
	const letter = cancelled(booking, deps);
	// Who withdraws a request that nobody answered yet knows it.
	if (!booking.wasConfirmed)
		return booking.decidedBy === booking.requestedBy ? [] : toRequester(trx, booking, letter);
	const history = await slotHistory(trx, booking.id);
	const told = await trx
		.selectFrom('mail')
		.select('recipientId')
		.where('subjectId', 'in', history.bookingIds)
		.where('calendarMethod', '=', 'REQUEST')
		.execute();
	const inCalendar = new Set(told.map((row) => row.recipientId));
	const askers = (await toAskers(trx, deps, booking, letter, 'CANCEL', history)).map((mail) =>
		inCalendar.has(mail.recipientId) ? mail : { recipientId: mail.recipientId, letter: mail.letter }
	);
	// A freed slot is the managers' to give away again.
	const also = booking.deciderRole === 'manager' ? [] : await toManagers(trx, letter);
	const known = new Set(askers.map((mail) => mail.recipientId));
	return [...askers, ...also.filter((mail) => !known.has(mail.recipientId))];
}

function facts(booking: BookingFacts, zone: string): Letter['facts'] {
	const { rigUpMinutes: up, rigDownMinutes: down } = booking;
	return [
		['Booking', booking.number],
		['Cell', `${booking.cell}, ${booking.cellName}`],
		['Time', `${spanInWords(booking.during, zone)} (${zone})`],
		['Rigging', up || down ? `${up} min before and ${down} min after` : null],
		['Build', `${booking.build}, ${booking.buildTitle}`],
		['Client', booking.client],
		['Test', booking.kind?.replaceAll('_', ' ') ?? null],
		['Purpose', booking.purpose],
		['Asked for by', booking.askerName]
	];
}

const linkTo = (booking: BookingFacts, deps: Deps) =>
	`${deps.config.origin}/bookings/${encodeURIComponent(booking.number)}`;

const inShort = (booking: BookingFacts, deps: Deps) =>
	`${booking.cell}, ${instantInWords(booking.during.from, deps.config.labTimeZone)}`;

function asked(booking: BookingFacts, deps: Deps, what: string): Letter {
	const zone = deps.config.labTimeZone;
	return {
		subject: `Request ${booking.number}: ${inShort(booking, deps)}`,
		opening: `${booking.askerName} ${what} in ${booking.cell}. It needs your answer.`,
		facts: [
			...facts(booking, zone),
			[
				'Would replace',
				booking.replaces && booking.replacesDuring
					? `${booking.replaces} ${spanInWords(booking.replacesDuring, zone)}, which stands until you confirm`
					: null
			]
		],
		link: linkTo(booking, deps)
	};
}

function settled(booking: BookingFacts, deps: Deps, isMove: boolean): Letter {
	return {
		subject: `${isMove ? 'Moved' : 'Confirmed'}: ${booking.number}, ${inShort(booking, deps)}`,
		opening: isMove
			? `The slot has moved; this is its new time. It is yours, and nobody else can book it.`
			: `The slot is confirmed. It is yours, and nobody else can book it.`,
		facts: [
			...facts(booking, deps.config.labTimeZone),
			['Takes the place of', booking.replaces],
			['Note', booking.reason]
		],
		link: linkTo(booking, deps)
	};
}

function declined(booking: BookingFacts, deps: Deps): Letter {
	return {
		subject: `Declined: ${booking.number}, ${inShort(booking, deps)}`,
		opening: booking.replaces
			? `The move was declined. ${booking.replaces} stands as it was.`
			: 'The request was declined. Another time or cell may suit.',
		facts: [
			...facts(booking, deps.config.labTimeZone),
			['Reason', booking.reason],
			['Declined by', booking.deciderName]
		],
		link: linkTo(booking, deps)
	};
}

function cancelled(booking: BookingFacts, deps: Deps): Letter {
	return {
		subject: `Cancelled: ${booking.number}, ${inShort(booking, deps)}`,
		opening: booking.wasConfirmed
			? 'The slot is cancelled, and its time is free again.'
			: 'The request is cancelled.',
		facts: [
			...facts(booking, deps.config.labTimeZone),
			['Reason', booking.reason],
			['Cancelled by', booking.deciderName]
		],
		link: linkTo(booking, deps)
	};
}

function calendarFacts(booking: BookingFacts, history: SlotHistory, deps: Deps): CalendarFacts {
	const { rigUpMinutes: up, rigDownMinutes: down } = booking;
	return {
		bookingId: history.rootId,
		sequence: booking.calendarSequence,
		from: booking.during.from,
		to: booking.during.to,
		summary: `${booking.cell}: build ${booking.build}`,
		location: booking.cell,
		description: [
			`Booking ${booking.number}, build ${booking.build}.`,
			...(up || down ? [`Rigging ${up} min before and ${down} min after.`] : []),
			'This entry is no release to run an engine.'
		].join('\n'),
		url: linkTo(booking, deps)
	};
}
