import { sql } from 'kysely';
import { z } from 'zod';
import { requireMay, type Principal, type Role } from '../access';
import { page, readCursor } from '../api';
import type { Db, Trx } from '../db';
import type { Deps } from '../deps';
import { badRequest, notFound } from '../problem';
import type { Person, PERSON_SORTS, PersonQuery } from './schemas';

const UUID = z.uuid();

const state = sql<Person['state']>`case when p.disabled_at is not null then 'disabled'
	when w.person_id is null then 'invited' else 'active' end`;

/** What each sort compares, as text, so that any page's key is text too. */
const KEYS: Record<(typeof PERSON_SORTS)[number], ReturnType<typeof sql<string>>> = {
	name: sql<string>`lower(p.display_name)`,
	email: sql<string>`p.email`,
	role: sql<string>`p.role`,
	created: sql<string>`to_char(p.created_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US')`
};

const lastInvitation = (column: 'created_at' | 'expires_at') =>
	sql<Date | null>`(select ${sql.ref(`i.${column}`)} from auth.invitation i
		where i.person_id = p.id and i.voided_at is null order by i.created_at desc limit 1)`;

function selectPeople(db: Db | Trx, now: Date) {
	return db
		.selectFrom('auth.person as p')
		.leftJoin('auth.password as w', 'w.personId', 'p.id')
		.leftJoin('client as c', 'c.id', 'p.clientId')
		.select(['p.id', 'p.email', 'p.displayName', 'p.role', 'p.createdAt', 'p.version', 'c.code as client'])
		.select(state.as('state'))
		.select((eb) => [
			eb
				.selectFrom('auth.session as s')
				.select((count) => count.fn.countAll<number>().as('n'))
				.whereRef('s.userId', '=', 'p.id')
				.where('s.expiresAt', '>', now)
				.as('sessions'),
			lastInvitation('created_at').as('invitedAt'),
			lastInvitation('expires_at').as('worksUntil')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectPeople>['execute']>>[number];

function viewOf(row: Row): Person {
	const { id, email, displayName: name, role, client, createdAt, version, sessions } = row;
	return {
		id,
		email,
		name,
		role: role as Role,
		client,
		state: row.state,
		createdAt,
		sessions: Number(sessions),
		invitation:
			row.state === 'invited' && row.invitedAt && row.worksUntil
				? { sentAt: row.invitedAt, worksUntil: row.worksUntil }
				: null,
		version
	};
}

export async function personView(db: Db | Trx, id: string, now: Date): Promise<Person> {
	const row = UUID.safeParse(id).success
		? await selectPeople(db, now).where('p.id', '=', id).executeTakeFirst()
		: undefined;
	if (!row) throw notFound('This person');
	return viewOf(row);
}

export async function getPerson(deps: Deps, who: Principal, id: string): Promise<Person> {
	requireMay(who, 'person.admin');
	return personView(deps.pools.auth, id, deps.now());
}

/** Everyone, sorted and filtered as asked; pages by key. */
export async function listPeople(deps: Deps, who: Principal, query: z.output<typeof PersonQuery>) {
	requireMay(who, 'person.admin');
	const isDown = query.sort.startsWith('-');
	const direction = isDown ? 'desc' : 'asc';
	const key = KEYS[query.sort.replace('-', '') as keyof typeof KEYS];
	let all = selectPeople(deps.pools.auth, deps.now())
		.select(key.as('sortKey'))
		.orderBy(key, direction)
		.orderBy('p.id', direction)
		.limit(query.limit + 1);
	if (query.role) all = all.where('p.role', '=', query.role);
	if (query.state) all = all.where(state, '=', query.state);
	const { client } = query;
	if (client) all = all.where((eb) => eb.or([eb('c.code', '=', client), eb(sql`c.id::text`, '=', client)]));
	if (query.cursor) {
		const [after, id] = readCursor(query.cursor);
		if (after === undefined || !UUID.safeParse(id).success)
			throw badRequest('cursor: send the nextCursor of an earlier answer as it was.');
		const beyond = sql.raw(isDown ? '<' : '>');
		all = all.where(sql<boolean>`(${key}, p.id) ${beyond} (${after}, ${id}::uuid)`);
	}
	const rows = page(await all.execute(), query.limit, (row) => [row.sortKey, row.id]);
	return { items: rows.items.map(viewOf), nextCursor: rows.nextCursor };
}
