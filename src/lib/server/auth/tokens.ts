import { requireMay, type Principal } from '../access';
import type { Db } from '../db';
import type { Deps } from '../deps';
import { notFound, wrongField } from '../problem';
import { newSecret, sameHash, sha256 } from './secrets';

const PREFIX = 'trn';
const USED_AT_MOST_EVERY_MS = 60_000;

/** `trn.<id>.<secret>`: the id finds the row, and only the secret's hash is kept. */
async function insertToken(auth: Db, personId: string, label: string): Promise<string> {
	const secret = newSecret();
	const { id } = await auth
		.insertInto('auth.token')
		.values({ personId, label, secretSha256: sha256(secret) })
		.returning('id')
		.executeTakeFirstOrThrow();
	return `${PREFIX}.${id}.${secret}`;
}

export async function principalOfToken(deps: Deps, text: string): Promise<Principal | null> {
	const parts = text.split('.');
	if (parts.length !== 3 || parts[0] !== PREFIX || !/^[0-9a-f-]{36}$/.test(parts[1]!)) return null;
	const row = await deps.pools.auth
		.selectFrom('auth.token as t')
		.innerJoin('auth.person as p', 'p.id', 't.personId')
		.select([
			't.id',
			't.secretSha256',
			't.lastUsedAt',
			'p.id as personId',
			'p.email',
			'p.displayName',
			'p.role',
			'p.clientId',
			'p.units'
		])
		.where('t.id', '=', parts[1]!)
		.where('t.revokedAt', 'is', null)
		.where('p.disabledAt', 'is', null)
		.executeTakeFirst();
	if (!row || !sameHash(parts[2]!, row.secretSha256)) return null;
	const now = deps.now();
	if (!row.lastUsedAt || now.getTime() - row.lastUsedAt.getTime() > USED_AT_MOST_EVERY_MS)
		await deps.pools.auth
			.updateTable('auth.token')
			.set({ lastUsedAt: now })
			.where('id', '=', row.id)
			.execute();
	return {
		personId: row.personId,
		name: row.displayName,
		email: row.email,
		role: row.role as Principal['role'],
		clientId: row.clientId,
		units: row.units as Principal['units'],
		via: { kind: 'token', id: row.id }
	};
}

/** @returns the whole token, shown once */
export async function createToken(deps: Deps, who: Principal, label: string): Promise<string> {
	requireMay(who, 'account.own');
	if (!label.trim()) throw wrongField('label', 'say what will use this token.');
	return insertToken(deps.pools.auth, who.personId, label.trim().slice(0, 80));
}

/** For the operator's command line: no person is signed in there. @throws Problem 404 */
export async function createTokenFor(deps: Deps, email: string, label: string): Promise<string> {
	const person = await deps.pools.auth
		.selectFrom('auth.person')
		.select('id')
		.where('email', '=', email.trim().toLowerCase())
		.where('disabledAt', 'is', null)
		.executeTakeFirst();
	if (!person) throw notFound(`A person with the address ${email}`);
	return insertToken(deps.pools.auth, person.id, label);
}

export async function listTokens(deps: Deps, who: Principal) {
	return deps.pools.auth
		.selectFrom('auth.token')
		.select(['id', 'label', 'createdAt', 'lastUsedAt'])
		.where('personId', '=', who.personId)
		.where('revokedAt', 'is', null)
		.orderBy('createdAt', 'desc')
		.execute();
}

export async function revokeToken(deps: Deps, who: Principal, id: string): Promise<void> {
	const { numUpdatedRows } = await deps.pools.auth
		.updateTable('auth.token')
		.set({ revokedAt: deps.now() })
		.where('id', '=', id)
		.where('personId', '=', who.personId)
		.where('revokedAt', 'is', null)
		.executeTakeFirst();
	if (numUpdatedRows === 0n) throw notFound('This token');
}
