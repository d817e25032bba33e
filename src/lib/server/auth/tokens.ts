import { requireMay, type Principal } from '../access';
import { recordAudit, SYSTEM, writingAccounts, type Actor, type Trx } from '../db';
import type { Deps } from '../deps';
import { notFound, wrongField } from '../problem';
import { newSecret, sameHash, sha256 } from './secrets';

const PREFIX = 'trn';
const USED_AT_MOST_EVERY_MS = 60_000;

interface Owner {
	personId: string;
	clientId: string | null;
}

/** `trn.<id>.<secret>`: the id finds the row, and only the secret's hash is kept. */
async function insertToken(trx: Trx, actor: Actor, owner: Owner, label: string): Promise<string> {
	const secret = newSecret();
	const { id } = await trx
		.insertInto('auth.token')
		.values({ personId: owner.personId, label, secretSha256: sha256(secret) })
		.returning('id')
		.executeTakeFirstOrThrow();
	await recordAudit(trx, actor, {
		action: 'person.add_token',
		subject: 'person',
		subjectId: owner.personId,
		clientId: owner.clientId,
		after: { token: label }
	});
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
	return writingAccounts(deps.pools, who, (trx) => insertToken(trx, who, who, label.trim().slice(0, 80)));
}

/** For the operator's command line: no person is signed in there. @throws Problem 404 */
export async function createTokenFor(deps: Deps, email: string, label: string): Promise<string> {
	return writingAccounts(deps.pools, SYSTEM, async (trx) => {
		const owner = await trx
			.selectFrom('auth.person')
			.select(['id as personId', 'clientId'])
			.where('email', '=', email.trim().toLowerCase())
			.where('disabledAt', 'is', null)
			.executeTakeFirst();
		if (!owner) throw notFound(`A person with the address ${email}`);
		return insertToken(trx, SYSTEM, owner, label);
	});
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
	await writingAccounts(deps.pools, who, async (trx) => {
		const revoked = await trx
			.updateTable('auth.token')
			.set({ revokedAt: deps.now() })
			.where('id', '=', id)
			.where('personId', '=', who.personId)
			.where('revokedAt', 'is', null)
			.returning('label')
			.executeTakeFirst();
		if (!revoked) throw notFound('This token');
		await recordAudit(trx, who, {
			action: 'person.revoke_token',
			subject: 'person',
			subjectId: who.personId,
			clientId: who.clientId,
			before: { token: revoked.label }
		});
	});
}
