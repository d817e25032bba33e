import { sql } from 'kysely';
import type { Principal } from '../access';
import { csvResponse, unitHead, type CsvCell } from '../csv';
import { reading } from '../db';
import type { Deps } from '../deps';
import { labelsOf } from './labels';
import type { TrendQueryInput } from './schemas';
import { counted, groupId, selectGroups } from './select';
import { readTrend } from './read';

const PAGE_ROWS = 5000;

/** The trend as a table: its groups, or every run behind it, however many there are. */
export async function trendCsv(
	deps: Deps,
	who: Principal,
	query: TrendQueryInput,
	table: 'points' | 'groups'
): Promise<Response> {
	const pages = table === 'groups' ? groupPages(deps, who, query) : pointPages(deps, who, query);
	return csvResponse(`trend-${query.metric}-by-${query.groupBy}-${table}.csv`, pages);
}

async function* groupPages(deps: Deps, who: Principal, query: TrendQueryInput): AsyncGenerator<CsvCell[][]> {
	const trend = await readTrend(deps, who, query);
	const of = (name: string) => unitHead(name, trend.unit);
	yield [
		[
			query.groupBy,
			'title',
			'n',
			'runs',
			'sets_of_repeats',
			of('mean'),
			of('sd'),
			of('ci95_low'),
			of('ci95_high'),
			'compared_with',
			of('difference'),
			of('difference_ci95_low'),
			of('difference_ci95_high')
		],
		...trend.groups.map(({ key, title, n, runs, sets, mean, sd, ci95, difference }) => [
			key,
			title,
			n,
			runs,
			sets,
			mean,
			sd,
			ci95?.[0] ?? null,
			ci95?.[1] ?? null,
			difference && trend.against,
			difference && difference.value,
			difference && difference.ci95[0],
			difference && difference.ci95[1]
		])
	];
}

interface PointRow {
	id: string;
	startedAt: string;
	group: string;
	unit: string;
	cells: (string | null)[];
	value: number;
	u: number | null;
}

async function* pointPages(deps: Deps, who: Principal, query: TrendQueryInput): AsyncGenerator<CsvCell[][]> {
	let last: PointRow | null = null;
	let keys: Map<string, string> | null = null;
	for (;;) {
		const { rows, labels } = await pageOfPoints(deps, who, query, last, keys);
		keys = labels;
		const head = last ? [] : [headOf(query, rows[0]?.unit)];
		yield [
			...head,
			...rows.map(({ cells, group, startedAt, value, u }) => [
				...cells,
				startedAt,
				labels.get(group) ?? group,
				value,
				u
			])
		];
		if (rows.length < PAGE_ROWS) return;
		last = rows.at(-1)!;
	}
}

const headOf = (query: TrendQueryInput, unit: string | undefined) => [
	'run',
	'client',
	'engine',
	'build',
	'fuel',
	'batch',
	'cell',
	'kind',
	'state',
	'started_at',
	'group',
	unitHead(query.metric, unit),
	unitHead('u', unit)
];

/** One page in one short transaction; the labels are made once, so that every page names groups alike. */
function pageOfPoints(
	deps: Deps,
	who: Principal,
	query: TrendQueryInput,
	last: PointRow | null,
	known: Map<string, string> | null
) {
	const zone = deps.config.labTimeZone;
	return reading(deps.pools, who, async (trx) => {
		const { from } = await counted(trx, query, zone);
		const labels = known ?? labelsOf(await selectGroups(trx, query, from, zone));
		const after = last
			? sql`and r.started_at <= ${last.startedAt}::timestamptz
				and (r.started_at < ${last.startedAt}::timestamptz or r.id > ${last.id}::uuid)`
			: sql``;
		const { rows } = await sql<PointRow>`
			with page as (
				select r.id, r.number, r.client_id, r.build_id, r.cell_id, r.fuel_batch_id, r.kind, r.state, r.started_at,
					${groupId(query.groupBy, zone)} as group_id, m.value, m.u, m.unit
				from ${from} ${after} order by r.started_at desc, r.id limit ${PAGE_ROWS}
			)
			select p.id, to_json(p.started_at) #>> '{}' as started_at, p.group_id as "group", p.value, p.u, p.unit,
				array[p.number, c.code, e.code, b.number, f.code, q.code, cell.code, p.kind, p.state] as cells
			from page p
			join client c on c.id = p.client_id join build b on b.id = p.build_id join engine e on e.id = b.engine_id
			join cell on cell.id = p.cell_id join fuel_batch q on q.id = p.fuel_batch_id join fuel f on f.id = q.fuel_id
			order by p.started_at desc, p.id`.execute(trx);
		return { rows, labels };
	});
}
