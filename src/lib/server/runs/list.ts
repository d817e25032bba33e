import { sql, type RawBuilder } from 'kysely';
import { jsonObjectFrom } from 'kysely/helpers/postgres';
import { z } from 'zod';
import type { Principal } from '../access';
import { page, readCursor } from '../api';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { badRequest } from '../problem';
import { RUN_TABLES, runConditions } from './filter';
import { selectHeads } from './heads';
import type { RunQueryInput, RunRow } from './schemas';

/** Figures that a list shows unless it is asked for others; the rest is on the run's page. */
export const LISTED = ['peak_power', 'peak_power_corrected', 'peak_torque', 'bte_max', 'bsfc_min'];

/** Flags that stand: raised by hand, or by the computation in force. */
const FLAGS = sql`flag g left join reduction d on d.id = g.reduction_id
	where g.run_id = r.id and (g.reduction_id is null or d.superseded_at is null)`;

function selectRows(trx: Trx, metrics: readonly string[]) {
	return selectHeads(trx).select((eb) => [
		sql<number>`(select count(*) from ${FLAGS})`.as('flags'),
		sql<Record<string, number> | null>`(select jsonb_object_agg(m.code, m.value) from metric m
				where m.run_id = r.id and m.is_current and m.code = any(${metrics}::text[]))`.as('figures'),
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
		flags: Number(row.flags),
		metrics: figures ?? {},
		curve:
			curve?.speed?.length && curve.torque && curve.power
				? { speed: curve.speed, torque: curve.torque, power: curve.power }
				: null
	};
}

const WRONG_CURSOR = 'cursor: send the nextCursor of an earlier answer as it was, with the same sort.';
const parsed = <T extends z.ZodType>(shape: T, cursor: string): z.output<T> => {
	const read = shape.safeParse(readCursor(cursor));
	if (!read.success) throw badRequest(WRONG_CURSOR);
	return read.data;
};

interface Order {
	/** What else has to be joined to sort. */
	join: RawBuilder<unknown>;
	by: RawBuilder<unknown>;
	/** The row's place in the order, as the cursor carries it. */
	key: RawBuilder<string[]>;
	after: (cursor: string) => RawBuilder<unknown>;
}

const NOTHING = sql``;

/** How rows follow one another, and where a page goes on. Runs without the figure that is sorted by come last both ways. */
function orderOf(sort: string): Order {
	const isDown = sort.startsWith('-');
	const [direction, beyond] = isDown ? [sql`desc`, sql`<`] : [sql`asc`, sql`>`];
	const by = sort.replace('-', '');
	if (by === 'started')
		return {
			join: NOTHING,
			by: isDown ? sql`r.started_at desc, r.id` : sql`r.started_at, r.id desc`,
			key: sql`array[to_json(r.started_at) #>> '{}', r.id::text]`,
			after: (cursor) => {
				const [at, id] = parsed(z.tuple([z.iso.datetime({ offset: true }), z.uuid()]), cursor);
				const same = isDown ? sql`r.id > ${id}::uuid` : sql`r.id < ${id}::uuid`;
				return sql`r.started_at ${isDown ? sql`<=` : sql`>=`} ${at}::timestamptz
					and (r.started_at ${beyond} ${at}::timestamptz or ${same})`;
			}
		};
	if (by === 'number')
		return {
			join: sql`join client c on c.id = r.client_id`,
			// A number counts on behind its client's code, past 9999 with more digits.
			by: sql`c.code ${direction}, length(r.number) ${direction}, r.number ${direction}`,
			key: sql`array[c.code, r.number]`,
			after: (cursor) => {
				const [code, number] = parsed(z.tuple([z.string(), z.string()]), cursor);
				return sql`(c.code, length(r.number), r.number) ${beyond} (${code}::text, ${number.length}::int, ${number}::text)`;
			}
		};
	return {
		join: sql`left join metric s on s.run_id = r.id and s.is_current and s.code = ${by}`,
		by: sql`s.value ${direction} nulls last, r.id ${direction}`,
		key: sql`array[coalesce(s.value::text, ''), r.id::text]`,
		after: (cursor) => {
			const [value, id] = parsed(z.tuple([z.string().regex(/^$|^-?[\d.]+(e[-+]?\d+)?$/), z.uuid()]), cursor);
			if (value === '') return sql`s.value is null and r.id ${beyond} ${id}::uuid`;
			return sql`((s.value, r.id) ${beyond} (${value}::float8, ${id}::uuid) or s.value is null)`;
		}
	};
}

/** `%` and `_` are typed as themselves. */
const contains = (text: string) => `%${text.replace(/[\\%_]/g, '\\$&')}%`;

async function conditionsOf(trx: Trx, deps: Deps, query: RunQueryInput) {
	const { where, notes } = await runConditions(trx, query, deps.config.labTimeZone);
	if (query.state) where.push(sql`r.state = ${query.state}`);
	if (query.flagged !== undefined)
		where.push(sql`${query.flagged ? NOTHING : sql`not`} exists (select from ${FLAGS})`);
	if (query.text) {
		const pattern = contains(query.text);
		where.push(sql`(r.number ilike ${pattern} or b.number ilike ${pattern} or b.title ilike ${pattern})`);
	}
	return { where: where.length ? sql`where ${sql.join(where, sql` and `)}` : NOTHING, notes };
}

export type RunListQuery = Partial<RunQueryInput> & { limit: number; cursor?: string | undefined };

/** Runs this person may see, newest first unless asked otherwise; `notes` says why a filter can match nothing. */
export async function listRuns(deps: Deps, who: Principal, query: RunListQuery) {
	const order = orderOf(query.sort ?? '-started');
	return reading(deps.pools, who, async (trx) => {
		const { where, notes } = await conditionsOf(trx, deps, { sort: '-started', ...query });
		const after = query.cursor ? order.after(query.cursor) : null;
		// First which rows, then what stands in them: a sort over all runs must not read all curves.
		const { rows: ids } = await sql<{ id: string; key: string[] }>`
			select r.id, ${order.key} as key from ${RUN_TABLES} ${order.join} ${where}
			${after ? sql`${where === NOTHING ? sql`where` : sql`and`} ${after}` : NOTHING}
			order by ${order.by} limit ${query.limit + 1}`.execute(trx);
		const found = new Map<string, Row>();
		if (ids.length > 0) {
			const wanted = ids.slice(0, query.limit).map(({ id }) => id);
			const rows = selectRows(trx, query.metrics ?? LISTED).where('r.id', 'in', wanted);
			for (const row of await rows.execute()) found.set(row.id, row);
		}
		const { items, nextCursor } = page(ids, query.limit, ({ key }) => key);
		return { items: items.map(({ id }) => toRow(found.get(id)!)), nextCursor, notes };
	});
}
