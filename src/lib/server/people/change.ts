import type { z } from 'zod';
import { requireMay, type Principal } from '../access';
import { clientOfRole, endSessionsOf, voidAllLinks } from '../auth';
import { recordAudit, writingAccounts, type Trx } from '../db';
import type { Deps } from '../deps';
import { conflict } from '../problem';
import { lockPerson, requireOtherAdmin, type LockedPerson } from './locked';
import { personView } from './read';
import type { Person, PersonChange } from './schemas';

/**
 * Another name, role or client. It holds from the person's next request on, in every open session and for every token, since
 * each request reads who they are anew.
 * @throws Problem 409 for the last administrator, and for one's own role unless `ownRole` is said; 412 when stale
 */
export async function changePerson(
	deps: Deps,
	who: Principal,
	id: string,
	change: z.output<typeof PersonChange>,
	ifMatch: number | null = null
): Promise<Person> {
	requireMay(who, 'person.admin');
	return writingAccounts(deps.pools, who, async (trx) => {
		const person = await lockPerson(trx, id, ifMatch);
		const before = await personView(trx, id, deps.now());
		const name = change.name ?? before.name;
		const role = change.role ?? before.role;
		const isClient = role === 'client';
		const kept = isClient ? before.client : null;
		const client = change.client === undefined ? kept : change.client;
		const clientId = await clientOfRole(trx, role, client ?? undefined);
		if (role !== 'admin') await requireOtherAdmin(trx, person, 'given another role');
		if (person.id === who.personId && role !== 'admin' && !change.ownRole)
			throw conflict(
				'This would take your own administration away at once. If that is meant, say so with ownRole.'
			);
		if (name === before.name && role === before.role && clientId === person.clientId) return before;
		await set(trx, person, { displayName: name, role, clientId });
		const after = await personView(trx, id, deps.now());
		await recordAudit(trx, who, {
			action: 'person.change',
			subject: 'person',
			subjectId: person.id,
			clientId: person.clientId,
			before: { name: before.name, role: before.role, client: before.client },
			after: { name, role, client: after.client }
		});
		return after;
	});
}

interface Columns {
	displayName?: string;
	role?: string;
	clientId?: string | null;
	disabledAt?: Date | null;
}

async function set(trx: Trx, person: LockedPerson, columns: Columns): Promise<void> {
	await trx
		.updateTable('auth.person')
		.set({ ...columns, version: person.version + 1 })
		.where('id', '=', person.id)
		.execute();
}

/** Nobody signs in with the account any more: sessions end, tokens are refused, links are void, no mail is sent. */
export async function disablePerson(
	deps: Deps,
	who: Principal,
	id: string,
	{ ownAccount = false }: { ownAccount?: boolean | undefined } = {}
): Promise<Person> {
	requireMay(who, 'person.admin');
	return writingAccounts(deps.pools, who, async (trx) => {
		const now = deps.now();
		const person = await lockPerson(trx, id, null);
		if (person.disabledAt) return personView(trx, id, now);
		await requireOtherAdmin(trx, person, 'disabled');
		if (person.id === who.personId && !ownAccount)
			throw conflict('This is your own account. If you mean to shut yourself out, say so with ownAccount.');
		await set(trx, person, { disabledAt: now });
		await voidAllLinks(trx, person.id, now);
		const ended = await endSessionsOf(trx, person.id);
		await recordAudit(trx, who, {
			action: 'person.disable',
			subject: 'person',
			subjectId: person.id,
			clientId: person.clientId,
			after: { sessionsEnded: ended }
		});
		return personView(trx, id, now);
	});
}

/** The account opens again, with the password and the tokens that it had. */
export async function enablePerson(deps: Deps, who: Principal, id: string): Promise<Person> {
	requireMay(who, 'person.admin');
	return writingAccounts(deps.pools, who, async (trx) => {
		const person = await lockPerson(trx, id, null);
		if (person.disabledAt) {
			await set(trx, person, { disabledAt: null });
			await recordAudit(trx, who, {
				action: 'person.enable',
				subject: 'person',
				subjectId: person.id,
				clientId: person.clientId
			});
		}
		return personView(trx, id, deps.now());
	});
}

/** Signs someone out everywhere; their tokens go on. */
export async function endSessions(deps: Deps, who: Principal, id: string): Promise<Person> {
	requireMay(who, 'person.admin');
	return writingAccounts(deps.pools, who, async (trx) => {
		const person = await lockPerson(trx, id, null);
		const ended = await endSessionsOf(trx, person.id);
		if (ended)
			await recordAudit(trx, who, {
				action: 'person.end_sessions',
				subject: 'person',
				subjectId: person.id,
				clientId: person.clientId,
				after: { ended }
			});
		return personView(trx, id, deps.now());
	});
}
