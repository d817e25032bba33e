import { sql } from 'kysely';
import { z } from 'zod';
import { instantOrDayFromIso } from '$lib/domain/scheduling';
import type { Principal } from '../access';
import { page, readCursor } from '../api';
import { reading } from '../db';
import type { Deps } from '../deps';
import { badRequest, wrongField } from '../problem';
import { resolve } from '../refs';
import type { Booking, BookingQueryInput } from './schemas';
import { selectBookings } from './select';
import { bookingView, bookingViews } from './view';

const CursorShape = z.tuple([z.iso.datetime(), z.uuid()]);

export async function getBooking(deps: Deps, who: Principal, ref: string): Promise<Booking> {
	return reading(deps.pools, who, async (trx) =>
		bookingView(trx, deps, who, (await resolve(trx, 'booking', ref)).id)
	);
}

function instantOf(deps: Deps, field: 'from' | 'to', text: string): Date {
	const at = instantOrDayFromIso(text, deps.config.labTimeZone);
	if (!at) throw wrongField(field, 'give a day like 2026-03-01, or a time like 2026-03-01T08:00:00+01:00.');
	return at;
}

/** Bookings this person may see, latest first. */
export async function listBookings(deps: Deps, who: Principal, query: BookingQueryInput) {
	return reading(deps.pools, who, async (trx) => {
		const now = deps.now();
		let all = selectBookings(trx)
			.orderBy(sql`lower(b.during)`, 'desc')
			.orderBy('b.id')
			.limit(query.limit + 1);
		for (const [kind, column] of [
			['cell', 'b.cellId'],
			['client', 'b.clientId'],
			['build', 'b.buildId']
		] as const) {
			const ref = query[kind];
			if (ref) all = all.where(column, '=', (await resolve(trx, kind, ref, { field: kind })).id);
		}
		if (query.state === 'confirmed')
			all = all.where('b.state', '=', 'confirmed').where(sql`upper(b.during)`, '>', now);
		else if (query.state === 'done')
			all = all.where('b.state', 'in', ['confirmed', 'done']).where(sql`upper(b.during)`, '<=', now);
		else if (query.state) all = all.where('b.state', '=', query.state);
		if (query.from) all = all.where(sql`upper(b.during)`, '>', instantOf(deps, 'from', query.from));
		if (query.to) all = all.where(sql`lower(b.during)`, '<', instantOf(deps, 'to', query.to));
		if (query.cursor) {
			const cursor = CursorShape.safeParse(readCursor(query.cursor));
			if (!cursor.success) throw badRequest('cursor: send the nextCursor of an earlier answer as it was.');
			const [from, id] = cursor.data;
			all = all.where((eb) =>
				eb.or([
					eb(sql`lower(b.during)`, '<', new Date(from)),
					eb.and([eb(sql`lower(b.during)`, '=', new Date(from)), eb('b.id', '>', id)])
				])
			);
		}
		const { items, nextCursor } = page(await all.execute(), query.limit, (row) => [
			row.during.from.toISOString(),
			row.id
		]);
		return { items: await bookingViews(trx, deps, who, items), nextCursor };
	});
}
