import { sql } from 'kysely';
import type { Trx } from '../db';

/** A booking with what its letters say, as it stands now. */
export async function bookingFacts(trx: Trx, id: string) {
	return trx
		.selectFrom('booking as b')
		.innerJoin('client as cl', 'cl.id', 'b.clientId')
		.innerJoin('cell as c', 'c.id', 'b.cellId')
		.innerJoin('build as bu', 'bu.id', 'b.buildId')
		.innerJoin('person as asker', 'asker.id', 'b.requestedBy')
		.leftJoin('person as decider', 'decider.id', 'b.decidedBy')
		.leftJoin('booking as old', 'old.id', 'b.replacesId')
		.select((eb) => [
			'b.id',
			'b.clientId',
			'b.number',
			'b.state',
			'b.during',
			'b.kind',
			'b.purpose',
			'b.reason',
			'b.requestedBy',
			'b.decidedBy',
			'b.calendarSequence',
			'cl.name as client',
			'c.code as cell',
			'c.name as cellName',
			'bu.number as build',
			'bu.title as buildTitle',
			'asker.displayName as askerName',
			'decider.displayName as deciderName',
			'decider.role as deciderRole',
			'old.number as replaces',
			'old.during as replacesDuring',
			// Rig minutes are copied at confirmation and stay: they tell a slot that was cancelled from a request that was.
			sql<boolean>`b.rig_up_minutes is not null`.as('wasConfirmed'),
			eb.fn.coalesce('b.rigUpMinutes', 'c.rigUpMinutes').as('rigUpMinutes'),
			eb.fn.coalesce('b.rigDownMinutes', 'c.rigDownMinutes').as('rigDownMinutes')
		])
		.where('b.id', '=', id)
		.executeTakeFirst();
}

export type BookingFacts = NonNullable<Awaited<ReturnType<typeof bookingFacts>>>;

export interface SlotHistory {
	/** The first of the slots that replaced each other: its id names the calendar entry of all of them. */
	rootId: string;
	bookingIds: string[];
	requesters: string[];
}

/** This booking and those it has replaced one after the other. */
export async function slotHistory(trx: Trx, id: string): Promise<SlotHistory> {
	const { rows } = await sql<{ id: string; requestedBy: string }>`
		with recursive chain as (
			select id, replaces_id, requested_by, 0 as depth from booking where id = ${id}::uuid
			union all
			select b.id, b.replaces_id, b.requested_by, chain.depth + 1 from booking b join chain on b.id = chain.replaces_id
		)
		select id, requested_by from chain order by depth`.execute(trx);
	return {
		rootId: rows.at(-1)!.id,
		bookingIds: rows.map((row) => row.id),
		requesters: [...new Set(rows.map((row) => row.requestedBy))]
	};
}
