import { sql } from 'kysely';
import type { Trx } from '../db';
import { badRequest, notFound } from '../problem';

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

/** What can be named by id or by its own code or number, and the words for it. */
const KINDS = {
	client: { key: 'code', owned: false, words: 'client' },
	cell: { key: 'code', owned: false, words: 'cell' },
	fuel: { key: 'code', owned: false, words: 'fuel' },
	fuel_batch: { key: 'code', owned: true, words: 'fuel batch' },
	limit_set: { key: 'code', owned: true, words: 'limit set' },
	engine: { key: 'code', owned: true, words: 'engine' },
	build: { key: 'number', owned: true, words: 'build' },
	booking: { key: 'number', owned: true, words: 'booking' },
	run: { key: 'number', owned: true, words: 'run' }
} as const;
export type RefKind = keyof typeof KINDS;

export interface Found {
	id: string;
	/** The owning client; null for what is the lab's. */
	clientId: string | null;
}

interface Options {
	/** Field the sentence goes to; without it the thing is the request's own subject, and its absence a 404. */
	field?: string;
	/** Only what this client may use: its own, and the lab's. */
	clientId?: string | null;
}

/**
 * Finds a thing by its id or its own code or number, among what this person may see.
 * One match is taken; several need `client`; none is "not found" (or wrong input at the field).
 */
export async function resolve(trx: Trx, kind: RefKind, ref: string, options: Options = {}): Promise<Found> {
	const { key, owned, words } = KINDS[kind];
	const table = sql.table(kind);
	const clientColumn = owned ? sql`client_id` : sql`null::uuid`;
	const match = UUID.test(ref) ? sql`id = ${ref.toLowerCase()}::uuid` : sql`${sql.ref(key)} = ${ref}`;
	const own =
		owned && options.clientId ? sql`and (client_id is null or client_id = ${options.clientId}::uuid)` : sql``;
	const { rows } = await sql<{ id: string; clientId: string | null }>`
		select id, ${clientColumn} as client_id from ${table} where ${match} ${own} limit 20`.execute(trx);
	// A client's own thing goes before the lab's of the same code.
	const found = options.clientId
		? rows
				.filter((row) => row.clientId === options.clientId)
				.concat(rows)
				.slice(0, 1)
		: rows;
	if (found.length === 1) return found[0]!;
	if (found.length > 1)
		throw badRequest(`Several clients have a ${words} ${ref}. Name the client too.`, {
			client: `needed: several have a ${words} ${ref}`
		});
	if (!options.field) throw notFound(`The ${words} ${ref.slice(0, 60)}`);
	throw badRequest(`${options.field}: there is no ${words} ${ref.slice(0, 60)}.`, {
		[options.field]: `there is no ${words} ${ref.slice(0, 60)}`
	});
}

/**
 * The client a new thing belongs to: the one a client's person belongs to; else the one named; else null, for the caller to decide.
 * A client naming another than itself is told that there is none such.
 */
export async function clientFor(
	trx: Trx,
	who: { clientId: string | null },
	named: string | undefined
): Promise<string | null> {
	if (named === undefined) return who.clientId;
	return (await resolve(trx, 'client', named, { field: 'client' })).id;
}
