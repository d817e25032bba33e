import { withRigTime } from '$lib/domain/scheduling';
import { requireMay, type Principal } from '../access';
import { rangeOf, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { conflict, forbidden } from '../problem';
import { requireFree, tellingClash, type Wish } from './clash';
import { bookingRow, lockBooking, lockCells, promiseMail, requireOpen, type LockedBooking } from './locked';
import type { AsHistory } from './request';
import type { Booking } from './schemas';
import { bookingView, mayChange } from './view';

export interface DecisionInput {
	reason?: string | null | undefined;
	ifMatch?: number | null;
}

/** The slot that this request would replace, while it still stands ahead. */
async function slotToReplace(trx: Trx, row: LockedBooking, now: Date): Promise<LockedBooking | null> {
	if (!row.replacesId) return null;
	const old = await bookingRow(trx, row.replacesId);
	return old.state === 'confirmed' && old.during.to > now ? old : null;
}

async function endReplaced(trx: Trx, deps: Deps, who: Principal, old: LockedBooking, by: string) {
	await trx.deleteFrom('occupancy').where('bookingId', '=', old.id).execute();
	await trx
		.updateTable('booking')
		.set({
			state: 'cancelled',
			reason: `Moved: ${by} stands for it.`,
			decidedBy: who.personId,
			decidedAt: deps.now(),
			version: old.version + 1
		})
		.where('id', '=', old.id)
		.execute();
	await recordAudit(trx, who, {
		action: 'booking.replaced',
		subject: 'booking',
		subjectId: old.id,
		clientId: old.clientId,
		before: { state: old.state, ...old.during },
		after: { state: 'cancelled', by }
	});
}

/**
 * Makes a request a slot that nobody else can hold, rigging included; a request to move takes the place of the slot it moves.
 * @throws Problem 409 that says with what it clashes, as far as this person may know
 */
export async function confirmBooking(
	deps: Deps,
	who: Principal,
	ref: string,
	{ reason, ifMatch = null }: DecisionInput = {},
	{ asHistory = false }: AsHistory = {}
): Promise<Booking> {
	requireMay(who, 'booking.decide');
	let wish: Wish | null = null;
	const confirm = async (trx: Trx) => {
		const now = deps.now();
		const row = await lockBooking(trx, ref, ifMatch);
		const { id, clientId, cellId, buildId, number, during } = row;
		requireOpen(row, ['requested'], now, 'confirmed');
		if (!asHistory && during.to <= now)
			throw conflict(`${number} lies in the past, so it cannot be confirmed. Move it, or decline it.`);
		const old = await slotToReplace(trx, row, now);
		const cell = await trx
			.selectFrom('cell')
			.select(['rigUpMinutes', 'rigDownMinutes'])
			.where('id', '=', cellId)
			.executeTakeFirstOrThrow();
		const taken = withRigTime(during, cell.rigUpMinutes, cell.rigDownMinutes);
		wish = { key: id, cellId, buildId, during: taken, ignore: old ? [old.id] : [] };
		await requireFree(trx, deps, who, wish);
		await lockCells(trx, cellId, ...(old ? [old.cellId] : []));
		if (old) await endReplaced(trx, deps, who, old, number);
		await trx
			.insertInto('occupancy')
			.values({
				cellId,
				clientId,
				buildId,
				bookingId: id,
				kind: 'booking',
				during: rangeOf(taken.from, taken.to)
			})
			.execute();
		const version = row.version + 1;
		await trx
			.updateTable('booking')
			.set({
				state: 'confirmed',
				...cell,
				reason: reason || null,
				decidedBy: who.personId,
				decidedAt: now,
				// The calendar entry of a moved slot lives on under a later sequence.
				calendarSequence: old ? old.calendarSequence + 1 : row.calendarSequence,
				replacesId: old?.id ?? null,
				version
			})
			.where('id', '=', id)
			.execute();
		await recordAudit(trx, who, {
			action: 'booking.confirm',
			subject: 'booking',
			subjectId: id,
			clientId,
			before: { state: row.state },
			after: { state: 'confirmed', ...cell, ...during, reason: reason || null }
		});
		if (!asHistory) await promiseMail(trx, 'booking.confirmed', row, version);
		return bookingView(trx, deps, who, id);
	};
	return tellingClash(
		deps,
		who,
		() => wish,
		() => writing(deps.pools, who, confirm)
	);
}

export async function declineBooking(
	deps: Deps,
	who: Principal,
	ref: string,
	{ reason, ifMatch = null }: DecisionInput = {},
	{ asHistory = false }: AsHistory = {}
): Promise<Booking> {
	requireMay(who, 'booking.decide');
	return writing(deps.pools, who, async (trx) => {
		const row = await lockBooking(trx, ref, ifMatch);
		requireOpen(row, ['requested'], deps.now(), 'declined');
		await end(trx, deps, who, row, { state: 'declined', reason, asHistory });
		return bookingView(trx, deps, who, row.id);
	});
}

/** Ends a request or a slot; the time of a slot is free again at once. */
export async function cancelBooking(
	deps: Deps,
	who: Principal,
	ref: string,
	{ reason, ifMatch = null }: DecisionInput = {},
	{ asHistory = false }: AsHistory = {}
): Promise<Booking> {
	requireMay(who, 'booking.cancel');
	return writing(deps.pools, who, async (trx) => {
		const row = await lockBooking(trx, ref, ifMatch);
		if (!mayChange(who, row.requestedBy))
			throw forbidden('cancel a booking that someone else asked for. A manager may');
		requireOpen(row, ['requested', 'confirmed'], deps.now(), 'cancelled');
		if (row.state === 'confirmed') {
			await lockCells(trx, row.cellId);
			await trx.deleteFrom('occupancy').where('bookingId', '=', row.id).execute();
			// A request to move it has nothing to replace any more: it lives on as a request of its own.
			await trx
				.updateTable('booking')
				.set((eb) => ({ replacesId: null, version: eb('version', '+', 1) }))
				.where('replacesId', '=', row.id)
				.where('state', '=', 'requested')
				.execute();
		}
		await end(trx, deps, who, row, { state: 'cancelled', reason, asHistory });
		return bookingView(trx, deps, who, row.id);
	});
}

interface Ending extends AsHistory {
	state: 'declined' | 'cancelled';
	reason: string | null | undefined;
}

async function end(
	trx: Trx,
	deps: Deps,
	who: Principal,
	row: LockedBooking,
	{ state, reason, asHistory }: Ending
): Promise<void> {
	const version = row.version + 1;
	await trx
		.updateTable('booking')
		.set({
			state,
			reason: reason || null,
			decidedBy: who.personId,
			decidedAt: deps.now(),
			calendarSequence: row.state === 'confirmed' ? row.calendarSequence + 1 : row.calendarSequence,
			version
		})
		.where('id', '=', row.id)
		.execute();
	await recordAudit(trx, who, {
		action: state === 'declined' ? 'booking.decline' : 'booking.cancel',
		subject: 'booking',
		subjectId: row.id,
		clientId: row.clientId,
		before: { state: row.state },
		after: { state, reason: reason || null }
	});
	if (!asHistory) await promiseMail(trx, `booking.${state}`, row, version);
}
