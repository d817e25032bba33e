import { sql } from 'kysely';
import { z } from 'zod';
import { instantOrDayFromIso } from '$lib/domain/scheduling';
import { requireMay, type Principal } from '../access';
import { fields, page, PageQuery, readCursor } from '../api';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { badRequest, wrongField } from '../problem';

/** What the trail speaks of, where its name is kept, and the page it has. */
const SUBJECTS = {
	person: { table: 'person', name: 'display_name' },
	client: { table: 'client', name: 'code' },
	cell: { table: 'cell', name: 'code' },
	closure: null,
	fuel: { table: 'fuel', name: 'code' },
	fuel_batch: { table: 'fuel_batch', name: 'code' },
	limit_set: { table: 'limit_set', name: 'code' },
	engine: { table: 'engine', name: 'code' },
	build: { table: 'build', name: 'number' },
	booking: { table: 'booking', name: 'number' },
	run: { table: 'run', name: 'number' },
	trace: null
} as const;

const date = z.string().trim().max(40, 'is too long for a time');
export const AuditQuery = PageQuery.extend({
	person: z.uuid('name a person by id').optional(),
	subject: z.string().trim().max(40, 'is too long for a subject').optional(),
	subjectId: z.uuid('name the subject by id').optional(),
	from: date.optional(),
	to: date.optional()
});
export const AuditEntry = z.object({
	id: z.string(),
	at: fields.instantOut,
	/** Who; null where the laboratory's own machinery or its command line did it. */
	person: z.object({ id: z.string(), name: z.string() }).nullable(),
	action: z.string(),
	subject: z.string(),
	subjectId: z.string().nullable(),
	/** The subject's code, number or name as it is now. */
	subjectName: z.string().nullable(),
	before: z.unknown(),
	after: z.unknown()
});

/** A name for each subject on the page: one question for each kind. */
async function namesOf(trx: Trx, rows: { subject: string; subjectId: string | null }[]) {
	const names = new Map<string, string>();
	for (const [subject, kept] of Object.entries(SUBJECTS)) {
		const ids = rows.filter((row) => row.subject === subject).flatMap((row) => row.subjectId ?? []);
		if (!kept || ids.length === 0) continue;
		const found = await sql<{ id: string; name: string }>`
			select id, ${sql.ref(kept.name)} as name from ${sql.table(kept.table)} where id = any(${[...new Set(ids)]}::uuid[])`.execute(
			trx
		);
		for (const { id, name } of found.rows) names.set(id, name);
	}
	return names;
}

function momentOf(deps: Deps, field: 'from' | 'to', text: string): Date {
	const at = instantOrDayFromIso(text, deps.config.labTimeZone);
	if (!at) throw wrongField(field, 'give a day like 2026-03-01, or a time like 2026-03-01T08:00:00+01:00.');
	return at;
}

/** Who did what, newest first, with what it was before and after. */
export async function readAudit(deps: Deps, who: Principal, query: z.output<typeof AuditQuery>) {
	requireMay(who, 'audit.read');
	return reading(deps.pools, who, async (trx) => {
		// Text with all six decimals: a Date would cut them, and the next page would begin at the wrong row.
		const key = sql<string>`to_char(a.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"')`;
		let all = trx
			.selectFrom('audit as a')
			.leftJoin('person as p', 'p.id', 'a.actorId')
			.select(['a.id', 'a.at', 'a.action', 'a.subject', 'a.subjectId', 'a.before', 'a.after'])
			.select(['a.actorId', 'p.displayName', key.as('key')])
			.orderBy('a.at', 'desc')
			.orderBy('a.id', 'desc')
			.limit(query.limit + 1);
		if (query.person) all = all.where('a.actorId', '=', query.person);
		if (query.subject) all = all.where('a.subject', '=', query.subject);
		if (query.subjectId) all = all.where('a.subjectId', '=', query.subjectId);
		if (query.from) all = all.where('a.at', '>=', momentOf(deps, 'from', query.from));
		if (query.to) all = all.where('a.at', '<', momentOf(deps, 'to', query.to));
		if (query.cursor) {
			const cursor = z.tuple([z.iso.datetime(), z.uuid()]).safeParse(readCursor(query.cursor));
			if (!cursor.success) throw badRequest('cursor: send the nextCursor of an earlier answer as it was.');
			const [at, id] = cursor.data;
			all = all.where(sql<boolean>`(a.at, a.id) < (${at}::timestamptz, ${id}::uuid)`);
		}
		const { items, nextCursor } = page(await all.execute(), query.limit, (row) => [row.key, row.id]);
		const names = await namesOf(trx, items);
		return {
			items: items.map(({ actorId, displayName, key: _, ...row }) => ({
				...row,
				person: actorId ? { id: actorId, name: displayName ?? '' } : null,
				subjectName: (row.subjectId && names.get(row.subjectId)) ?? null
			})),
			nextCursor
		};
	});
}

/** Who may be asked about, by name. */
export async function listActors(deps: Deps, who: Principal) {
	requireMay(who, 'audit.read');
	return reading(deps.pools, who, (trx) =>
		trx.selectFrom('person').select(['id', 'displayName as name']).orderBy('displayName').execute()
	);
}

export const AUDIT_SUBJECTS = Object.keys(SUBJECTS);
