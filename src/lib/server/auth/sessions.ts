import { NodePostgresAdapter } from '@lucia-auth/adapter-postgresql';
import { Lucia, TimeSpan } from 'lucia';
import type { Role, Principal } from '../access';
import { recordAudit, writingAccounts, type Trx } from '../db';
import type { Deps } from '../deps';
import { notFound } from '../problem';
import { newSecret, sha256 } from './secrets';

interface PersonAttributes {
	email: string;
	display_name: string;
	role: Role;
	client_id: string | null;
	units: 'si' | 'us';
	disabled_at: Date | null;
}

declare module 'lucia' {
	interface Register {
		Lucia: ReturnType<typeof lucia>;
		DatabaseUserAttributes: PersonAttributes;
		DatabaseSessionAttributes: { created_at: Date; seen_at: Date; user_agent: string | null };
	}
}

/** Idle sessions end after 30 to 60 minutes (renewal happens in the second half), all of them after 12 hours. */
const IDLE = new TimeSpan(60, 'm');
const ABSOLUTE_MS = 12 * 3600 * 1000;
const SEEN_AT_MOST_EVERY_MS = 60_000;

function lucia(deps: Deps) {
	return new Lucia(
		new NodePostgresAdapter(deps.pools.authPool, { user: 'auth.person', session: 'auth.session' }),
		{
			sessionExpiresIn: IDLE,
			getUserAttributes: (person) => person,
			getSessionAttributes: (session) => ({ createdAt: session.created_at, seenAt: session.seen_at })
		}
	);
}

const instances = new WeakMap<Deps, ReturnType<typeof lucia>>();
function of(deps: Deps) {
	let found = instances.get(deps);
	if (!found) instances.set(deps, (found = lucia(deps)));
	return found;
}

/** The database holds the hash of the cookie's token: a stolen table opens nothing. */
const idOf = (token: string) => sha256(token).toString('hex');

/** In the transaction that checks who signs in. @returns the token for the cookie; it is nowhere else */
export async function insertSession(
	trx: Trx,
	now: Date,
	personId: string,
	userAgent: string | null
): Promise<string> {
	const token = newSecret();
	await trx
		.insertInto('auth.session')
		.values({
			id: idOf(token),
			userId: personId,
			expiresAt: new Date(now.getTime() + IDLE.milliseconds()),
			createdAt: now,
			seenAt: now,
			userAgent: userAgent?.slice(0, 200) ?? null
		})
		.execute();
	return token;
}

export async function principalOfSession(deps: Deps, token: string): Promise<Principal | null> {
	const { session, user } = await of(deps).validateSession(idOf(token));
	if (!session) return null;
	const now = deps.now();
	if (user.disabled_at || now.getTime() - session.createdAt.getTime() > ABSOLUTE_MS) {
		await of(deps).invalidateSession(session.id);
		return null;
	}
	if (now.getTime() - session.seenAt.getTime() > SEEN_AT_MOST_EVERY_MS)
		await deps.pools.auth
			.updateTable('auth.session')
			.set({ seenAt: now })
			.where('id', '=', session.id)
			.execute();
	return {
		personId: user.id,
		name: user.display_name,
		email: user.email,
		role: user.role,
		clientId: user.client_id,
		units: user.units,
		via: { kind: 'session', id: session.id }
	};
}

export async function endSession(deps: Deps, sessionId: string): Promise<void> {
	await of(deps).invalidateSession(sessionId);
}

/** All of someone's sessions but the one given, in the transaction that gives the reason. */
export async function endSessionsOf(trx: Trx, personId: string, except?: string): Promise<number> {
	let ended = trx.deleteFrom('auth.session').where('userId', '=', personId);
	if (except) ended = ended.where('id', '<>', except);
	return Number((await ended.executeTakeFirst()).numDeletedRows);
}

/** Where this person is signed in, latest seen first. */
export async function listSessions(deps: Deps, who: Principal) {
	const now = deps.now();
	const rows = await deps.pools.auth
		.selectFrom('auth.session')
		.select(['id', 'createdAt', 'seenAt', 'userAgent'])
		.where('userId', '=', who.personId)
		.where('expiresAt', '>', now)
		.where('createdAt', '>', new Date(now.getTime() - ABSOLUTE_MS))
		.orderBy('seenAt', 'desc')
		.orderBy('id')
		.execute();
	return rows.map((row) => ({ ...row, isThis: who.via.kind === 'session' && who.via.id === row.id }));
}

/** Ends one of one's own sessions, or all others. @throws Problem 404 when there is no such session of this person */
export async function endOwnSessions(deps: Deps, who: Principal, id?: string): Promise<number> {
	return writingAccounts(deps.pools, who, async (trx) => {
		const own = who.via.kind === 'session' ? who.via.id : undefined;
		const ended = id
			? Number(
					(
						await trx
							.deleteFrom('auth.session')
							.where('userId', '=', who.personId)
							.where('id', '=', id)
							.executeTakeFirst()
					).numDeletedRows
				)
			: await endSessionsOf(trx, who.personId, own);
		if (id && !ended) throw notFound('This session');
		if (ended)
			await recordAudit(trx, who, {
				action: 'session.end',
				subject: 'person',
				subjectId: who.personId,
				clientId: who.clientId,
				after: { ended }
			});
		return ended;
	});
}
