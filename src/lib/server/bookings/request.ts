import { requireMay, type Principal } from '../access';
import { nextNumber, rangeOf, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { clientFor, resolve } from '../refs';
import { promiseMail } from './locked';
import type { Booking, NewBookingInput } from './schemas';
import { requireBookingTimes } from './times';
import { bookingView } from './view';

/** For entering what has happened already (demo data, an old calendar): times may lie in the past, and nobody is mailed. */
export interface AsHistory {
	asHistory?: boolean;
}

/** Asks for a slot. Requests overlap freely: refusing one would tell of a rival's. */
export async function requestBooking(
	deps: Deps,
	who: Principal,
	input: NewBookingInput,
	{ asHistory = false }: AsHistory = {}
): Promise<Booking> {
	requireMay(who, 'booking.request');
	requireBookingTimes(input, deps.now(), asHistory);
	return writing(deps.pools, who, async (trx) => {
		const named = await clientFor(trx, who, input.client);
		const build = await resolve(trx, 'build', input.build, { field: 'build', clientId: named });
		const clientId = build.clientId!;
		const cell = await resolve(trx, 'cell', input.cell, { field: 'cell' });
		const batch = input.fuelBatch
			? await resolve(trx, 'fuel_batch', input.fuelBatch, { field: 'fuelBatch', clientId })
			: null;
		const number = await nextNumber(trx, clientId, 'B');
		const { id, version } = await trx
			.insertInto('booking')
			.values({
				clientId,
				number,
				cellId: cell.id,
				buildId: build.id,
				fuelBatchId: batch?.id ?? null,
				during: rangeOf(input.from, input.to),
				kind: input.kind ?? null,
				purpose: input.purpose || null,
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
			after: { number, cell: input.cell, build: input.build, from: input.from, to: input.to }
		});
		if (!asHistory) await promiseMail(trx, 'booking.requested', { id, clientId }, version);
		return bookingView(trx, deps, who, id);
	});
}
