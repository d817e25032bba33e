import { sql, type RawBuilder } from 'kysely';
import { z } from 'zod';
import { tQuantile } from '$lib/domain/statistics/student-t';
import type { Principal } from '../access';
import { fields } from '../api';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { resolve, type RefKind } from '../refs';

const GROUPS = ['build', 'engine', 'fuel', 'batch', 'cell', 'month'] as const;

export const TrendQuery = z.object({
	metric: z.string().regex(/^[a-z][a-z0-9_]{1,60}$/, 'name a metric, e.g. bte_max'),
	groupBy: z.enum(GROUPS).default('build'),
	from: z
		.union([fields.instant, z.iso.date().transform((day) => new Date(`${day}T00:00:00Z`))], {
			error: 'give a date like 2026-03-01'
		})
		.optional(),
	to: z
		.union([fields.instant, z.iso.date().transform((day) => new Date(`${day}T23:59:59.999Z`))], {
			error: 'give a date like 2026-03-31'
		})
		.optional(),
	client: fields.ref.optional(),
	engine: fields.ref.optional(),
	build: fields.ref.optional(),
	fuel: fields.ref.optional(),
	cell: fields.ref.optional()
});

export const TrendView = z.object({
	metric: z.string(),
	unit: fields.unitOut.nullable(),
	groups: z.array(
		z.object({
			key: z.string(),
			title: z.string().nullable(),
			n: z.number(),
			mean: z.number(),
			/** Standard deviation (n − 1); null for a single run. */
			sd: z.number().nullable(),
			ci95: z.tuple([z.number(), z.number()]).nullable()
		})
	),
	points: z.array(
		z.object({
			run: z.string(),
			group: z.string(),
			at: fields.instantOut,
			value: z.number(),
			u: z.number().nullable()
		})
	),
	pointsTotal: z.number()
});

const MOST_POINTS = 5000;

/** What a run is grouped by: a key that tells groups apart, its label, and a second line. */
const GROUP_SQL: Record<
	(typeof GROUPS)[number],
	{ id: RawBuilder<string>; label: RawBuilder<string>; title: RawBuilder<string | null> }
> = {
	build: { id: sql`b.id::text`, label: sql`b.number`, title: sql`b.title` },
	engine: { id: sql`e.id::text`, label: sql`e.code`, title: sql`e.name` },
	fuel: { id: sql`f.id::text`, label: sql`f.code`, title: sql`f.name` },
	batch: { id: sql`q.id::text`, label: sql`q.code`, title: sql`f.name` },
	cell: { id: sql`cell.id::text`, label: sql`cell.code`, title: sql`cell.name` },
	month: {
		id: sql`to_char(r.started_at at time zone 'UTC', 'YYYY-MM')`,
		label: sql`to_char(r.started_at at time zone 'UTC', 'YYYY-MM')`,
		title: sql`null::text`
	}
};

/** Runs that count: not voided, the figure inside its method's range. */
async function filtersOf(trx: Trx, query: z.output<typeof TrendQuery>): Promise<RawBuilder<unknown>> {
	const parts: RawBuilder<unknown>[] = [
		sql`m.code = ${query.metric}`,
		sql`m.is_current`,
		sql`m.outside_range is null`,
		sql`r.state <> 'voided'`
	];
	if (query.from) parts.push(sql`r.started_at >= ${query.from}`);
	if (query.to) parts.push(sql`r.started_at <= ${query.to}`);
	const named: [RefKind, string | undefined, string, RawBuilder<unknown>][] = [
		['client', query.client, 'client', sql`r.client_id`],
		['engine', query.engine, 'engine', sql`b.engine_id`],
		['build', query.build, 'build', sql`r.build_id`],
		['fuel', query.fuel, 'fuel', sql`q.fuel_id`],
		['cell', query.cell, 'cell', sql`r.cell_id`]
	];
	for (const [kind, given, field, column] of named)
		if (given) parts.push(sql`${column} = ${(await resolve(trx, kind, given, { field })).id}::uuid`);
	return sql.join(parts, sql` and `);
}

const FROM = sql`metric m
	join run r on r.id = m.run_id
	join client c on c.id = r.client_id
	join build b on b.id = r.build_id
	join engine e on e.id = b.engine_id
	join cell on cell.id = r.cell_id
	join fuel_batch q on q.id = r.fuel_batch_id
	join fuel f on f.id = q.fuel_id`;

interface GroupRow {
	id: string;
	label: string;
	client: string | null;
	title: string | null;
	n: number;
	mean: number;
	sd: number | null;
	unit: string;
	last: Date;
}

/** A metric over groups of runs, with spread and the runs behind it. The interval is of the mean, by Student's t at n − 1. */
export async function readTrend(
	deps: Deps,
	who: Principal,
	query: z.output<typeof TrendQuery>
): Promise<z.input<typeof TrendView>> {
	const group = GROUP_SQL[query.groupBy];
	return reading(deps.pools, who, async (trx) => {
		const where = await filtersOf(trx, query);
		const { rows: groups } = await sql<GroupRow>`
			select ${group.id} as id, ${group.label} as label, min(c.code) as client, ${group.title} as title,
				count(*) as n, avg(m.value) as mean, stddev_samp(m.value) as sd, min(m.unit) as unit, max(r.started_at) as last
			from ${FROM} where ${where} group by 1, 2, 4 order by 2, 3 limit 500`.execute(trx);
		const keys = labelsOf(groups);
		const { rows: points } = await sql<{
			run: string;
			groupId: string;
			at: Date;
			value: number;
			u: number | null;
		}>`
			select r.number as run, ${group.id} as group_id, r.started_at as at, m.value, m.u
			from ${FROM} where ${where} order by r.started_at desc, r.id limit ${MOST_POINTS}`.execute(trx);
		return {
			metric: query.metric,
			unit: groups[0]?.unit ?? null,
			groups: groups.map((row) => ({
				key: keys.get(row.id)!,
				title: row.title,
				n: row.n,
				mean: row.mean,
				sd: row.sd,
				ci95: intervalOf(row)
			})),
			points: points
				.filter((point) => keys.has(point.groupId))
				.map(({ groupId, ...point }) => ({ ...point, group: keys.get(groupId)! })),
			pointsTotal: groups.reduce((sum, row) => sum + row.n, 0)
		};
	});
}

function intervalOf({ n, mean, sd }: GroupRow): [number, number] | null {
	if (n < 2 || sd === null) return null;
	const half = (tQuantile(0.975, n - 1) * sd) / Math.sqrt(n);
	return [mean - half, mean + half];
}

/** Two clients may each have a build B12: then, and only then, the client's code goes before it. */
function labelsOf(groups: GroupRow[]): Map<string, string> {
	const times = new Map<string, number>();
	for (const { label } of groups) times.set(label, (times.get(label) ?? 0) + 1);
	return new Map(
		groups.map(({ id, label, client }) => [id, times.get(label)! > 1 ? `${client} ${label}` : label])
	);
}

/** Metric codes that this person's runs have, for the chooser. */
export async function listMetricCodes(deps: Deps, who: Principal): Promise<string[]> {
	const { rows } = await reading(deps.pools, who, (trx) =>
		sql<{ code: string }>`select distinct code from metric where is_current order by code`.execute(trx)
	);
	return rows.map((row) => row.code);
}
