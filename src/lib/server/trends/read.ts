import { sql } from 'kysely';
import { tQuantile } from '$lib/domain/statistics/student-t';
import { welchDifference } from '$lib/domain/statistics/welch';
import type { Principal } from '../access';
import { reading } from '../db';
import type { Deps } from '../deps';
import { labelsOf } from './labels';
import type { Trend, TrendQueryInput } from './schemas';
import { counted, selectGroups, selectPoints, type GroupRow } from './select';

const MOST_POINTS = 5000;

/** A metric over groups of runs, with spread and the runs behind it. The interval is of the mean, by Student's t at n − 1. */
export async function readTrend(deps: Deps, who: Principal, query: TrendQueryInput): Promise<Trend> {
	const zone = deps.config.labTimeZone;
	return reading(deps.pools, who, async (trx) => {
		const { from, notes } = await counted(trx, query, zone);
		const rows = await selectGroups(trx, query, from, zone);
		const points = await selectPoints(trx, query, from, zone, MOST_POINTS);
		const keys = labelsOf(rows);
		const groups = compared(rows, keys, query.against, notes);
		return {
			metric: query.metric,
			unit: rows[0]?.unit ?? null,
			...groups,
			points: points
				.filter((point) => keys.has(point.groupId))
				.map(({ run, groupId, at, value, u }) => ({ run, group: keys.get(groupId)!, at, value, u })),
			pointsTotal: rows.reduce((sum, row) => sum + row.runs, 0),
			notes
		};
	});
}

/** The groups, each with its difference to the one that is compared with. */
function compared(
	rows: GroupRow[],
	keys: Map<string, string>,
	against: string | undefined,
	notes: string[]
): Pick<Trend, 'against' | 'groups'> {
	const keyOf = (row: GroupRow) => keys.get(row.id)!;
	const base = rows.find((row) => (against === undefined ? row.n > 1 : keyOf(row) === against));
	if (against !== undefined && !base && rows.length > 0)
		notes.push(`No group here is called ${against}, so nothing is compared.`);
	return {
		against: base ? keyOf(base) : null,
		groups: rows.map((row) => {
			const difference = base && base !== row ? welchDifference(row, base) : null;
			return {
				key: keyOf(row),
				title: row.title,
				n: row.n,
				runs: row.runs,
				sets: row.sets,
				mean: row.mean,
				sd: row.sd,
				ci95: intervalOf(row),
				difference: difference && {
					value: difference.value,
					df: difference.df,
					ci95: difference.interval
				}
			};
		})
	};
}

function intervalOf({ n, mean, sd }: GroupRow): [number, number] | null {
	if (n < 2 || sd === null) return null;
	const half = (tQuantile(0.975, n - 1) * sd) / Math.sqrt(n);
	return [mean - half, mean + half];
}

/** Metric codes that this person's runs have, for the chooser. */
export async function listMetricCodes(deps: Deps, who: Principal): Promise<string[]> {
	// From code to code along the index: there are some dozens of codes and perhaps a million figures.
	const { rows } = await reading(deps.pools, who, (trx) =>
		sql<{ code: string }>`with recursive each as (
				(select code from metric where is_current order by code limit 1)
				union all
				select (select m.code from metric m where m.is_current and m.code > each.code order by m.code limit 1)
				from each where each.code is not null
			) select code from each where code is not null`.execute(trx)
	);
	return rows.map((row) => row.code);
}
