import { sql } from 'kysely';
import { jsonObjectFrom } from 'kysely/helpers/postgres';
import type { z } from 'zod';
import type { Principal } from '../access';
import { page, readCursor } from '../api';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';
import type { RunQuery, RunRow } from './schemas';

/** Figures that a list shows; the rest is on the run's page. */
const LISTED = ['peak_power', 'peak_power_corrected', 'peak_torque', 'bte_max', 'bsfc_min'];

function selectRows(trx: Trx) {
	return trx
		.selectFrom('run as r')
		.innerJoin('client as c', 'c.id', 'r.clientId')
		.innerJoin('build as b', 'b.id', 'r.buildId')
		.innerJoin('engine as e', 'e.id', 'b.engineId')
		.innerJoin('cell', 'cell.id', 'r.cellId')
		.innerJoin('fuelBatch as f', 'f.id', 'r.fuelBatchId')
		.innerJoin('person as p', 'p.id', 'r.loggedBy')
		.select((eb) => [
			'r.id',
			'r.number',
			'c.code as client',
			'b.number as build',
			'b.title as buildTitle',
			'e.code as engine',
			'cell.code as cell',
			'cell.colour as cellColour',
			'f.code as fuelBatch',
			'r.kind',
			'r.state',
			'r.startedAt',
			'p.displayName as loggedBy',
			eb
				.selectFrom('flag as g')
				.leftJoin('reduction as d', 'd.id', 'g.reductionId')
				.whereRef('g.runId', '=', 'r.id')
				.where((or) => or.or([or('g.reductionId', 'is', null), or('d.supersededAt', 'is', null)]))
				.select(sql<number>`count(*)`.as('n'))
				.as('flags'),
			eb
				.selectFrom('metric as m')
				.whereRef('m.runId', '=', 'r.id')
				.where('m.isCurrent', '=', true)
				.where('m.code', 'in', LISTED)
				.select(sql<Record<string, number> | null>`jsonb_object_agg(m.code, m.value)`.as('figures'))
				.as('figures'),
			jsonObjectFrom(
				eb
					.selectFrom('reduction as d')
					.innerJoin('trace as t', 't.id', 'd.traceId')
					.whereRef('d.runId', '=', 'r.id')
					.where('d.supersededAt', 'is', null)
					.where('t.isPrimary', '=', true)
					.select([
						sql<number[] | null>`d.curve -> 'speed'`.as('speed'),
						sql<(number | null)[] | null>`d.curve -> 'torque'`.as('torque'),
						sql<(number | null)[] | null>`d.curve -> 'power'`.as('power')
					])
			).as('curve')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectRows>['executeTakeFirstOrThrow']>>;
function toRow(row: Row): RunRow {
	const { figures, curve, ...head } = row;
	return {
		...head,
		kind: row.kind as RunRow['kind'],
		state: row.state as RunRow['state'],
		flags: Number(row.flags ?? 0),
		metrics: figures ?? {},
		curve:
			curve?.speed?.length && curve.torque && curve.power
				? { speed: curve.speed, torque: curve.torque, power: curve.power }
				: null
	};
}

/** Runs this person may see, newest first. */
export async function listRuns(
	deps: Deps,
	who: Principal,
	query: z.output<typeof RunQuery> & { limit: number; cursor?: string | undefined }
) {
	const rows = await reading(deps.pools, who, async (trx) => {
		let all = selectRows(trx)
			.orderBy('r.startedAt', 'desc')
			.orderBy('r.id')
			.limit(query.limit + 1);
		if (query.client)
			all = all.where(
				'r.clientId',
				'=',
				(await resolve(trx, 'client', query.client, { field: 'client' })).id
			);
		if (query.build)
			all = all.where('r.buildId', '=', (await resolve(trx, 'build', query.build, { field: 'build' })).id);
		if (query.cell)
			all = all.where('r.cellId', '=', (await resolve(trx, 'cell', query.cell, { field: 'cell' })).id);
		if (query.fuelBatch)
			all = all.where(
				'r.fuelBatchId',
				'=',
				(await resolve(trx, 'fuel_batch', query.fuelBatch, { field: 'fuelBatch' })).id
			);
		if (query.state) all = all.where('r.state', '=', query.state);
		if (query.flagged !== undefined)
			all = all.where((eb) => {
				const isFlagged = eb.exists(
					eb
						.selectFrom('flag as g')
						.leftJoin('reduction as d', 'd.id', 'g.reductionId')
						.whereRef('g.runId', '=', 'r.id')
						.where((or) => or.or([or('g.reductionId', 'is', null), or('d.supersededAt', 'is', null)]))
						.select('g.id')
				);
				return query.flagged ? isFlagged : eb.not(isFlagged);
			});
		if (query.cursor) {
			const [at, id] = readCursor(query.cursor);
			all = all.where(
				sql<boolean>`(r.started_at < ${at}::timestamptz or (r.started_at = ${at}::timestamptz and r.id > ${id}::uuid))`
			);
		}
		return all.execute();
	});
	return page(rows.map(toRow), query.limit, (row) => [(row.startedAt as Date).toISOString(), row.id]);
}
