import { sql, type RawBuilder } from 'kysely';
import type { Trx } from '../db';
import { RUN_TABLES, runConditions } from '../runs';
import type { TrendQueryInput } from './schemas';

type GroupBy = TrendQueryInput['groupBy'];

interface Grouping {
	/** What tells groups apart, from the run alone: labels are looked up once per group, not once per run. */
	id: (zone: string) => RawBuilder<string>;
	/** `label`, `title` and `client` of the group `g.id`. */
	named: RawBuilder<unknown>;
}

const month = (zone: string) => sql<string>`to_char(r.started_at at time zone ${zone}, 'YYYY-MM')`;

const GROUPINGS: Record<GroupBy, Grouping> = {
	build: {
		id: () => sql`r.build_id::text`,
		named: sql`select x.number as label, x.title, c.code as client from build x
			join client c on c.id = x.client_id where x.id = g.id::uuid`
	},
	engine: {
		id: () => sql`b.engine_id::text`,
		named: sql`select x.code as label, x.name as title, c.code as client from engine x
			join client c on c.id = x.client_id where x.id = g.id::uuid`
	},
	fuel: {
		id: () => sql`q.fuel_id::text`,
		named: sql`select x.code as label, x.name as title, null as client from fuel x where x.id = g.id::uuid`
	},
	batch: {
		id: () => sql`r.fuel_batch_id::text`,
		named: sql`select x.code as label, f.name as title, coalesce(c.code, 'lab') as client from fuel_batch x
			join fuel f on f.id = x.fuel_id left join client c on c.id = x.client_id where x.id = g.id::uuid`
	},
	cell: {
		id: () => sql`r.cell_id::text`,
		named: sql`select x.code as label, x.name as title, null as client from cell x where x.id = g.id::uuid`
	},
	month: { id: month, named: sql`select g.id as label, null as title, null as client` }
};

export const groupId = (groupBy: GroupBy, zone: string) => GROUPINGS[groupBy].id(zone);

/** Runs that count: the figure inside its method's range, the run not void. */
export async function counted(trx: Trx, query: TrendQueryInput, zone: string) {
	const { where, notes } = await runConditions(trx, query, zone);
	const conditions = [
		sql`m.code = ${query.metric}`,
		sql`m.is_current`,
		sql`m.outside_range is null`,
		query.state === 'accepted' ? sql`r.state = 'accepted'` : sql`r.state <> 'voided'`,
		...where
	];
	const from = sql`${RUN_TABLES} join metric m on m.run_id = r.id where ${sql.join(conditions, sql` and `)}`;
	return { from, notes };
}

export interface GroupRow {
	id: string;
	label: string;
	client: string | null;
	title: string | null;
	n: number;
	runs: number;
	sets: number;
	mean: number;
	sd: number | null;
	unit: string;
}

const MOST_GROUPS = 500;

/** Groups with their counts and moments; repeats as a first stage, so that a set can stand for one value. */
export async function selectGroups(
	trx: Trx,
	query: TrendQueryInput,
	from: RawBuilder<unknown>,
	zone: string
): Promise<GroupRow[]> {
	const { named } = GROUPINGS[query.groupBy];
	const [n, mean, sd] =
		query.repeats === 'once'
			? [sql`count(*)`, sql`avg(mean)`, sql`stddev_samp(mean)`]
			: [
					sql`sum(runs)::int`,
					sql`sum(total) / sum(runs)`,
					// Sums of squares about each set's mean, and of the means about the whole: nothing cancels.
					sql`case when sum(runs) > 1 then sqrt((sum(within) + sum(runs * (mean - middle) ^ 2)) / (sum(runs) - 1)) end`
				];
	const { rows } = await sql<GroupRow>`
		with repeats as (
			select ${groupId(query.groupBy, zone)} as id, count(*)::int as runs, sum(m.value) as total, avg(m.value) as mean,
				coalesce(var_samp(m.value) * (count(*) - 1), 0) as within, min(m.unit) as unit
			from ${from}
			group by 1, r.build_id, r.cell_id, r.fuel_batch_id, r.kind, (r.started_at at time zone ${zone})::date
		), placed as (
			select *, sum(total) over (partition by id) / sum(runs) over (partition by id) as middle from repeats
		), g as (
			select id, ${n}::int as n, sum(runs)::int as runs, count(*)::int as sets, ${mean} as mean, ${sd} as sd,
				min(unit) as unit
			from placed group by id
		)
		select g.*, x.label, x.title, x.client from g join lateral (${named}) x on true
		order by x.label, x.client, g.id limit ${MOST_GROUPS}`.execute(trx);
	return rows;
}

export interface PointRow {
	id: string;
	run: string;
	groupId: string;
	at: Date;
	value: number;
	u: number | null;
}

/** Runs with their value, newest first. */
export async function selectPoints(
	trx: Trx,
	query: TrendQueryInput,
	from: RawBuilder<unknown>,
	zone: string,
	limit: number
): Promise<PointRow[]> {
	const { rows } = await sql<PointRow>`
		select r.id, r.number as run, ${groupId(query.groupBy, zone)} as group_id, r.started_at as at, m.value, m.u
		from ${from} order by r.started_at desc, r.id limit ${limit}`.execute(trx);
	return rows;
}
