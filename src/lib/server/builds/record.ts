import { sql, type RawBuilder } from 'kysely';
import type { z } from 'zod';
import { BEST_CODES, bestFigures, type BestFigure } from '$lib/domain/builds/best-figures';
import { partChanges, type Part } from '$lib/domain/builds/part-changes';
import { RUNNING_RPM } from '$lib/domain/reduction/totals';
import type { Principal } from '../access';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';
import type { Build, BuildRecord, RunningHours } from './schemas';

/** A build that were its own ancestor would otherwise have no end. */
const LONGEST_LINE = 200;

/**
 * Hours that an engine turned; voided runs count, since it turned all the same. Traces say it best; where a run has none,
 * its record from start to end stands in.
 */
async function hoursOf(trx: Trx, runs: RawBuilder<unknown>): Promise<RunningHours> {
	const { rows } = await sql<{
		tracedHours: number | null;
		tracedRuns: number;
		recordedHours: number | null;
		recordedRuns: number;
		unknownRuns: number;
	}>`
		with told as (
			-- An end before its start is no time; no end at all is not known.
			select m.value as traced, case when r.ended_at is not null
				then extract(epoch from greatest(r.ended_at, r.started_at) - r.started_at)::float8 / 3600 end as recorded
			from run r
			left join metric m on m.run_id = r.id and m.is_current and m.code = 'engine_hours'
			where ${runs}
		)
		select sum(traced) as traced_hours, count(traced)::int as traced_runs,
			sum(recorded) filter (where traced is null) as recorded_hours,
			(count(recorded) filter (where traced is null))::int as recorded_runs,
			(count(*) filter (where traced is null and recorded is null))::int as unknown_runs
		from told`.execute(trx);
	const { tracedHours, tracedRuns, recordedHours, recordedRuns, unknownRuns } = rows[0]!;
	return {
		hours: (tracedHours ?? 0) + (recordedHours ?? 0),
		runningAboveRpm: RUNNING_RPM,
		fromTraces: { hours: tracedHours ?? 0, runs: tracedRuns },
		fromRecords: { hours: recordedHours ?? 0, runs: recordedRuns },
		unknownRuns
	};
}

const hoursOfEngine = (trx: Trx, engineId: string) =>
	hoursOf(
		trx,
		sql`(r.client_id, r.build_id) in (select b.client_id, b.id from build b where b.engine_id = ${engineId}::uuid)`
	);

export async function engineHours(deps: Deps, who: Principal, ref: string): Promise<RunningHours> {
	return reading(deps.pools, who, async (trx) => hoursOfEngine(trx, (await resolve(trx, 'engine', ref)).id));
}

async function bestOf(trx: Trx, buildId: string): Promise<BestFigure[]> {
	const figures = await trx
		.selectFrom('metric as m')
		.innerJoin('run as r', 'r.id', 'm.runId')
		.select([
			'm.code',
			'm.unit',
			'm.value',
			'm.u',
			'r.number as run',
			'r.id as runId',
			sql<string | null>`case when m.code like '%\\_corrected' then r.correction end`.as('correction')
		])
		.where('r.buildId', '=', buildId)
		.where('r.state', '<>', 'voided')
		.where('m.isCurrent', '=', true)
		.where('m.outsideRange', 'is', null)
		.where('m.code', 'in', BEST_CODES)
		.orderBy('r.startedAt')
		.orderBy('r.id')
		.execute();
	return bestFigures(figures);
}

interface Ancestor {
	id: string;
	number: string;
	title: string;
	state: Build['state'];
	parts: Part[];
}

/** From the first build of the line to this one, each with what it changed against the one before. */
async function lineageOf(trx: Trx, buildId: string): Promise<z.input<typeof BuildRecord>['lineage']> {
	const { rows } = await sql<Ancestor>`
		with recursive line as (
			select b.*, 0 as depth from build b where b.id = ${buildId}::uuid
			union all
			select p.*, line.depth + 1 from build p
			join line on p.id = line.parent_id and p.client_id = line.client_id
			where line.depth < ${LONGEST_LINE}
		)
		select id, number, title, state, parts from line order by depth desc`.execute(trx);
	return rows.map(({ parts, ...build }, at) => {
		const parent = rows[at - 1];
		const changes = parent
			? partChanges(parts, parent.parts).flatMap(({ name, value, before, change }) =>
					change === 'same' ? [] : [{ name, value, before, change }]
				)
			: [];
		return { ...build, changes };
	});
}

/** What became of a build: hours, best figures, where it comes from and what was made of it. */
export async function getBuildRecord(
	deps: Deps,
	who: Principal,
	ref: string
): Promise<z.input<typeof BuildRecord>> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'build', ref);
		const { engineId } = await trx
			.selectFrom('build')
			.select('engineId')
			.where('id', '=', id)
			.executeTakeFirstOrThrow();
		const children = await trx
			.selectFrom('build')
			.select(['id', 'number', 'title', 'state'])
			.where('parentId', '=', id)
			.orderBy('createdAt')
			.orderBy('id')
			.execute();
		return {
			hours: await hoursOf(trx, sql`r.build_id = ${id}::uuid`),
			engineHours: await hoursOfEngine(trx, engineId),
			best: await bestOf(trx, id),
			lineage: await lineageOf(trx, id),
			children: children.map((child) => ({ ...child, state: child.state as Build['state'] }))
		};
	});
}
