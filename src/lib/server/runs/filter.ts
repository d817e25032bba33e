import { sql, type RawBuilder } from 'kysely';
import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { instantOrDayFromIso } from '$lib/domain/scheduling';
import { plusDays } from '$lib/domain/time';
import { fields } from '../api';
import type { Trx } from '../db';
import { Problem, wrongField } from '../problem';
import { resolve, type RefKind } from '../refs';

/** What runs can be filtered by, wherever runs are listed or counted. Days are the lab's; `to` includes its day. */
export const RunFilter = z.object({
	client: fields.ref.optional(),
	engine: fields.ref.optional(),
	build: fields.ref.optional(),
	fuel: fields.ref.optional(),
	batch: fields.ref.optional(),
	cell: fields.ref.optional(),
	kind: z.enum(RUN_KINDS, { error: `is one of ${RUN_KINDS.join(', ')}` }).optional(),
	from: z.string().max(40).optional(),
	to: z.string().max(40).optional(),
	runs: z.string().max(4000, 'name at most 50 runs').optional()
});
export type RunFilterInput = z.output<typeof RunFilter>;

const MOST_NAMED_RUNS = 50;

/** Tables that the conditions below speak of, by their aliases. */
export const RUN_TABLES = sql`run r
	join build b on b.id = r.build_id
	join fuel_batch q on q.id = r.fuel_batch_id`;

export interface Conditions {
	where: RawBuilder<unknown>[];
	/** Why nothing can match, as sentences: a filter names what this person cannot see or what there is not. */
	notes: string[];
}

const NAMED: readonly [keyof RunFilterInput, RefKind, RawBuilder<unknown>][] = [
	['engine', 'engine', sql`b.engine_id`],
	['build', 'build', sql`r.build_id`],
	['fuel', 'fuel', sql`q.fuel_id`],
	['batch', 'fuel_batch', sql`r.fuel_batch_id`],
	['cell', 'cell', sql`r.cell_id`]
];

/**
 * The filter as conditions over `RUN_TABLES`. A name that there is not matches nothing and says so: absent and foreign alike.
 * @throws Problem 400 for a day that is none, and for a code that several clients use
 */
export async function runConditions(trx: Trx, filter: RunFilterInput, zone: string): Promise<Conditions> {
	const found: Conditions = { where: [], notes: [] };
	let clientId: string | null = null;
	const named = async (kind: RefKind, field: keyof RunFilterInput, column: RawBuilder<unknown>) => {
		const given = filter[field];
		if (given === undefined) return null;
		const id = await idOf(trx, kind, given, field, clientId);
		if (id) found.where.push(sql`${column} = ${id}::uuid`);
		else found.notes.push(`There is no ${kind.replace('_', ' ')} ${given}.`);
		return id;
	};
	clientId = await named('client', 'client', sql`r.client_id`);
	for (const [field, kind, column] of NAMED) await named(kind, field, column);
	if (filter.kind) found.where.push(sql`r.kind = ${filter.kind}`);
	if (filter.from) found.where.push(sql`r.started_at >= ${dayStart(filter.from, 'from', zone)}`);
	if (filter.to) found.where.push(sql`r.started_at < ${dayEnd(filter.to, zone)}`);
	if (filter.runs) {
		const runs = filter.runs.split(',').filter(Boolean);
		if (runs.length > MOST_NAMED_RUNS) throw wrongField('runs', `name at most ${MOST_NAMED_RUNS} runs.`);
		found.where.push(sql`(r.number = any(${runs}::text[]) or r.id::text = any(${runs}::text[]))`);
	}
	if (found.notes.length) found.where.push(sql`false`);
	return found;
}

async function idOf(
	trx: Trx,
	kind: RefKind,
	given: string,
	field: string,
	clientId: string | null
): Promise<string | null> {
	try {
		return (await resolve(trx, kind, given, { field, clientId })).id;
	} catch (cause) {
		if (cause instanceof Problem && cause.status === 400 && cause.fields[field]) return null;
		throw cause;
	}
}

function dayStart(text: string, field: 'from' | 'to', zone: string): Date {
	const at = instantOrDayFromIso(text, zone);
	if (!at) throw wrongField(field, 'give a day like 2026-03-01, or a time like 2026-03-01T08:00:00+01:00.');
	return at;
}

/** A day includes itself; a clock time is the end. */
function dayEnd(text: string, zone: string): Date {
	const at = dayStart(text, 'to', zone);
	return text.includes('T') ? at : plusDays(at, 1, zone);
}
