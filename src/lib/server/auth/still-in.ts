import { sql } from 'kysely';
import type { Principal } from '../access';
import type { Deps } from '../deps';

/**
 * Whether the session or token that this person came in by still holds, with the same role and client. Asks without renewing:
 * something that runs by itself must not keep a session alive.
 */
export async function isStillIn(deps: Deps, who: Principal): Promise<boolean> {
	const person = await deps.pools.auth
		.selectFrom('auth.person')
		.select(['role', 'clientId'])
		.where('id', '=', who.personId)
		.where('disabledAt', 'is', null)
		.executeTakeFirst();
	if (person?.role !== who.role || person.clientId !== who.clientId) return false;
	const key =
		who.via.kind === 'session'
			? await deps.pools.auth
					.selectFrom('auth.session')
					.select('id')
					.where('id', '=', who.via.id)
					.where('expiresAt', '>', sql<Date>`now()`)
					.executeTakeFirst()
			: await deps.pools.auth
					.selectFrom('auth.token')
					.select('id')
					.where('id', '=', who.via.id)
					.where('revokedAt', 'is', null)
					.executeTakeFirst();
	return key !== undefined;
}
