import { withRigTime, type Interval } from '$lib/domain/scheduling';
import { may, requireMay, type Principal } from '../access';
import { nextNumber, rangeOf, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { conflict, forbidden } from '../problem';
import { resolve } from '../refs';
import { requireFree, tellingClash, type Wish } from './clash';
import { lockBooking, lockCells, promiseMail, requireOpen, type LockedBooking } from './locked';
import type { AsHistory } from './request';
import type { Booking, BookingMoveInput } from './schemas';
import { requireBookingTimes } from './times';
import { bookingView, mayChange } from './view';

interface Target {
	cellId: string;
	during: Interval;
}

/**
 * Another time or cell. A request is changed in place. A confirmed slot is moved at once by a manager and keeps its state; for
 * anyone else the move is a new request, and the slot stands until that is confirmed.
 * @returns the booking that carries the new time: the same one, or the new request
 */
export async function moveBooking(
	deps: Deps,
	who: Principal,
	ref: string,
	move: BookingMoveInput,
	ifMatch: number | null = null,
	{ asHistory = false }: AsHistory = {}
): Promise<Booking> {
	requireMay(who, 'booking.move');
	let wish: Wish | null = null;
	const work = async (trx: Trx) => {
		const now = deps.now();
		const row = await lockBooking(trx, ref, ifMatch);
		requireOpen(row, ['requested', 'confirmed'], now, 'moved');
		if (row.state === 'requested' && !mayChange(who, row.requestedBy))
			throw forbidden('change a request of someone else. A manager may');
		const cell = move.cell ? await resolve(trx, 'cell', move.cell, { field: 'cell' }) : null;
		const target: Target = {
			cellId: cell?.id ?? row.cellId,
			during: { from: move.from ?? row.during.from, to: move.to ?? row.during.to }
		};
		requireBookingTimes(target.during, now);
		if (isSame(row, target)) return bookingView(trx, deps, who, row.id);
		if (row.state === 'confirmed' && !may(who, 'booking.decide'))
			return bookingView(trx, deps, who, await askToMove(trx, deps, who, row, target, asHistory));
		if (row.state === 'confirmed') {
			wish = await wishOf(trx, row, target);
			await requireFree(trx, deps, who, wish);
			await lockCells(trx, row.cellId, target.cellId);
			await trx
				.updateTable('occupancy')
				.set({ cellId: target.cellId, during: rangeOf(wish.during.from, wish.during.to) })
				.where('bookingId', '=', row.id)
				.execute();
		}
		await setTarget(trx, who, row, target, asHistory);
		return bookingView(trx, deps, who, row.id);
	};
	return tellingClash(
		deps,
		who,
		() => wish,
		() => writing(deps.pools, who, work)
	);
}

function isSame(row: LockedBooking, { cellId, during }: Target): boolean {
	return row.cellId === cellId && +row.during.from === +during.from && +row.during.to === +during.to;
}

/** Rig minutes stay as they were copied, unless another cell brings its own. */
async function rigMinutesOf(trx: Trx, row: LockedBooking, { cellId }: Target) {
	if (cellId === row.cellId && row.rigUpMinutes !== null && row.rigDownMinutes !== null)
		return { rigUpMinutes: row.rigUpMinutes, rigDownMinutes: row.rigDownMinutes };
	return trx
		.selectFrom('cell')
		.select(['rigUpMinutes', 'rigDownMinutes'])
		.where('id', '=', cellId)
		.executeTakeFirstOrThrow();
}

async function wishOf(trx: Trx, row: LockedBooking, target: Target): Promise<Wish> {
	const rig = await rigMinutesOf(trx, row, target);
	const during = withRigTime(target.during, rig.rigUpMinutes, rig.rigDownMinutes);
	return { key: row.id, cellId: target.cellId, buildId: row.buildId, during, ignore: [row.id] };
}

async function setTarget(
	trx: Trx,
	who: Principal,
	row: LockedBooking,
	target: Target,
	asHistory: boolean
): Promise<void> {
	const confirmed = row.state === 'confirmed';
	const version = row.version + 1;
	await trx
		.updateTable('booking')
		.set({
			cellId: target.cellId,
			during: rangeOf(target.during.from, target.during.to),
			...(confirmed
				? { ...(await rigMinutesOf(trx, row, target)), calendarSequence: row.calendarSequence + 1 }
				: {}),
			version
		})
		.where('id', '=', row.id)
		.execute();
	await recordAudit(trx, who, {
		action: 'booking.move',
		subject: 'booking',
		subjectId: row.id,
		clientId: row.clientId,
		before: { cellId: row.cellId, ...row.during },
		after: { cellId: target.cellId, ...target.during }
	});
	// Who drags a request before confirming it tells its new time by the confirmation.
	if (!asHistory && (confirmed || !may(who, 'booking.decide')))
		await promiseMail(trx, 'booking.moved', row, version);
}

async function askToMove(
	trx: Trx,
	deps: Deps,
	who: Principal,
	row: LockedBooking,
	target: Target,
	asHistory: boolean
): Promise<string> {
	const open = await trx
		.selectFrom('booking')
		.select('number')
		.where('replacesId', '=', row.id)
		.where('state', '=', 'requested')
		.executeTakeFirst();
	if (open)
		throw conflict(
			`${open.number} asks to move ${row.number} already. Change that request, or cancel it first.`
		);
	const { clientId, buildId, fuelBatchId, kind, purpose } = row;
	const number = await nextNumber(trx, clientId, 'B');
	const { id, version } = await trx
		.insertInto('booking')
		.values({
			clientId,
			number,
			cellId: target.cellId,
			buildId,
			fuelBatchId,
			kind,
			purpose,
			during: rangeOf(target.during.from, target.during.to),
			replacesId: row.id,
			requestedBy: who.personId,
			requestedAt: deps.now()
		})
		.returning(['id', 'version'])
		.executeTakeFirstOrThrow();
	await recordAudit(trx, who, {
		action: 'booking.request',
		subject: 'booking',
		subjectId: id,
		clientId,
		after: { number, replaces: row.number, cellId: target.cellId, ...target.during }
	});
	if (!asHistory) await promiseMail(trx, 'booking.requested', { id, clientId }, version);
	return id;
}
