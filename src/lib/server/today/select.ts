import { sql } from 'kysely';
import type { Recorded } from '$lib/domain/scheduling';
import type { Trx } from '../db';
import { openChecks } from '../logbook';
import type { RunOnDay } from './schemas';

/** A run as the board judges and shows it. */
export interface BoardRun extends Recorded {
	cell: string;
	bookingId: string | null;
	/** Items of its pre-run checklist that nobody has answered; 0 once the record is closed. */
	openChecks: number;
	view: RunOnDay;
}

/** Runs of the day, all open ones, and those with a trace that asks for a map; row-level security decides which. */
export async function selectBoardRuns(trx: Trx, day: { from: Date; to: Date }): Promise<BoardRun[]> {
	const rows = await trx
		.selectFrom('run as r')
		.innerJoin('client as c', 'c.id', 'r.clientId')
		.innerJoin('build as b', 'b.id', 'r.buildId')
		.innerJoin('cell', 'cell.id', 'r.cellId')
		.innerJoin('person as p', 'p.id', 'r.loggedBy')
		.leftJoin('booking as k', 'k.id', 'r.bookingId')
		.select((eb) => [
			'r.id',
			'r.number',
			'c.code as client',
			'b.number as build',
			'r.buildId',
			'b.title as buildTitle',
			'cell.code as cell',
			'r.bookingId',
			'r.kind',
			'r.state',
			'r.startedAt',
			'r.endedAt',
			'p.displayName as loggedBy',
			eb
				.selectFrom('trace as t')
				.whereRef('t.runId', '=', 'r.id')
				.select(sql<number>`count(*)`.as('n'))
				.as('traces'),
			eb
				.selectFrom('trace as t')
				.whereRef('t.runId', '=', 'r.id')
				.where('t.state', '=', 'needs_map')
				.select(sql<number>`count(*)`.as('n'))
				.as('unmapped')
		])
		.where('r.state', '<>', 'voided')
		.where((eb) =>
			eb.or([
				eb.and([eb('r.startedAt', '>=', day.from), eb('r.startedAt', '<', day.to)]),
				eb('r.state', '=', 'open'),
				eb.and([eb(sql`upper(k.during)`, '>', day.from), eb(sql`lower(k.during)`, '<', day.to)]),
				eb.exists(
					eb
						.selectFrom('trace as t')
						.whereRef('t.runId', '=', 'r.id')
						.where('t.state', '=', 'needs_map')
						.select('t.id')
				)
			])
		)
		.orderBy('r.startedAt')
		.orderBy('r.id')
		.execute();
	const checks = await openChecks(
		trx,
		rows.filter(({ state }) => state === 'open').map(({ id }) => id)
	);
	return rows.map(({ id, cell, bookingId, startedAt, endedAt, traces, unmapped, ...row }) => ({
		cell,
		bookingId,
		startedAt,
		isOpen: row.state === 'open',
		traces: Number(traces ?? 0),
		unmapped: Number(unmapped ?? 0),
		openChecks: checks.get(id) ?? 0,
		view: {
			...row,
			kind: row.kind as RunOnDay['kind'],
			state: row.state as RunOnDay['state'],
			from: startedAt.toISOString(),
			to: endedAt?.toISOString() ?? null
		}
	}));
}

/** How many closed runs wait for someone to accept or void them. */
export async function countClosed(trx: Trx): Promise<{ flagged: number; plain: number }> {
	const { rows } = await sql<{ flagged: number; plain: number }>`
		select count(*) filter (where c.flagged)::int as flagged, count(*) filter (where not c.flagged)::int as plain
		from (select exists (select from flag g left join reduction d on d.id = g.reduction_id
			where g.run_id = r.id and (g.reduction_id is null or d.superseded_at is null)) as flagged
			from run r where r.state = 'closed') c`.execute(trx);
	return rows[0]!;
}
