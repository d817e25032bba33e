import { lockNames, type Trx } from '../db';
import { enqueue, type JobData } from '../jobs';
import { conflict, stale } from '../problem';
import { resolve } from '../refs';
import { shownState } from './view';

/**
 * Every change of a booking waits for its build first and for its cells, sorted, after that: one order for all, so nobody waits
 * in a circle. A booking, the slot it replaces and the request that would replace it share their build.
 */
export async function lockBooking(trx: Trx, ref: string, ifMatch: number | null) {
	const { id } = await resolve(trx, 'booking', ref);
	const { buildId } = await trx
		.selectFrom('booking')
		.select('buildId')
		.where('id', '=', id)
		.executeTakeFirstOrThrow();
	await lockNames(trx, [`build:${buildId}`]);
	const row = await bookingRow(trx, id);
	if (ifMatch !== null && ifMatch !== row.version) throw stale();
	return row;
}

export type LockedBooking = Awaited<ReturnType<typeof lockBooking>>;

export async function bookingRow(trx: Trx, id: string) {
	return trx
		.selectFrom('booking')
		.select([
			'id',
			'clientId',
			'number',
			'cellId',
			'buildId',
			'fuelBatchId',
			'during',
			'state',
			'kind',
			'purpose',
			'replacesId',
			'requestedBy',
			'rigUpMinutes',
			'rigDownMinutes',
			'calendarSequence',
			'version'
		])
		.where('id', '=', id)
		.forUpdate()
		.executeTakeFirstOrThrow();
}

export async function lockCells(trx: Trx, ...cellIds: string[]): Promise<void> {
	await lockNames(
		trx,
		cellIds.map((id) => `cell:${id}`)
	);
}

/** @throws Problem 409 that says what the booking is instead */
export function requireOpen(
	row: LockedBooking,
	states: readonly ('requested' | 'confirmed')[],
	now: Date,
	doing: string
): void {
	const state = shownState(row, now);
	if ((states as readonly string[]).includes(state)) return;
	const words = state === 'requested' ? 'a request that nobody has confirmed yet' : `${state} already`;
	throw conflict(`${row.number} is ${words}, so it cannot be ${doing}.`);
}

type BookingEvent = Extract<JobData<'mail.notify'>['event'], `booking.${string}`>;

/** Mail about this change, promised in the transaction that makes it. */
export async function promiseMail(
	trx: Trx,
	event: BookingEvent,
	booking: { id: string; clientId: string },
	revision: number
): Promise<void> {
	await enqueue(
		trx,
		'mail.notify',
		{ clientId: booking.clientId, event, subjectId: booking.id, revision },
		`${event}:${booking.id}:${revision}`
	);
}
