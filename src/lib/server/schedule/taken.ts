import { sql } from 'kysely';
import type { Interval } from '$lib/domain/scheduling';
import type { InstantRange, Trx } from '../db';

/** When each cell is taken, rigging included, by whomever: all that anyone may know of everyone. */
export async function takenByCell(trx: Trx, within: Interval): Promise<Map<string, Interval[]>> {
	const { rows } = await sql<{ cellId: string; during: InstantRange }>`
		select t.cell_id, t.during from taken(${within.from}::timestamptz, ${within.to}::timestamptz) t`.execute(trx);
	return byCell(rows);
}

/** The part of that which this person sees no row of. */
export async function takenUnseen(trx: Trx, within: Interval): Promise<Map<string, Interval[]>> {
	const { rows } = await sql<{ cellId: string; during: InstantRange }>`
		select t.cell_id, t.during from taken(${within.from}::timestamptz, ${within.to}::timestamptz) t
		where not exists (select from occupancy o
			where o.cell_id = t.cell_id and o.during = t.during and o.kind in ('booking', 'closure'))`.execute(trx);
	return byCell(rows);
}

function byCell(rows: { cellId: string; during: InstantRange }[]): Map<string, Interval[]> {
	const cells = new Map<string, Interval[]>();
	for (const { cellId, during } of rows) cells.set(cellId, [...(cells.get(cellId) ?? []), during]);
	return cells;
}
