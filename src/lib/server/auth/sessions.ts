import { NodePostgresAdapter } from '@lucia-auth/adapter-postgresql';
import { Lucia, TimeSpan } from 'lucia';
import type { Role, Principal } from '../access';
import type { Deps } from '../deps';
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
		DatabaseSessionAttributes: { created_at: Date; user_agent: string | null };
	}
}

/** Idle sessions end after 30 to 60 minutes (renewal happens in the second half), all of them after 12 hours. */
const IDLE = new TimeSpan(60, 'm');
const ABSOLUTE_MS = 12 * 3600 * 1000;

function lucia(deps: Deps) {
	return new Lucia(
		new NodePostgresAdapter(deps.pools.authPool, { user: 'auth.person', session: 'auth.session' }),
		{
			sessionExpiresIn: IDLE,
			getUserAttributes: (person) => person,
			getSessionAttributes: (session) => ({ createdAt: session.created_at })
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

/** @returns the token for the cookie; it is nowhere else */
export async function startSession(deps: Deps, personId: string, userAgent: string | null): Promise<string> {
	const token = newSecret();
	await of(deps).createSession(
		personId,
		{ created_at: deps.now(), user_agent: userAgent?.slice(0, 200) ?? null },
		{ sessionId: idOf(token) }
	);
	return token;
}

export async function principalOfSession(deps: Deps, token: string): Promise<Principal | null> {
	const { session, user } = await of(deps).validateSession(idOf(token));
	if (!session) return null;
	if (user.disabled_at || deps.now().getTime() - session.createdAt.getTime() > ABSOLUTE_MS) {
		await of(deps).invalidateSession(session.id);
		return null;
	}
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
