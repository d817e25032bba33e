import { writingAccounts } from '../db';
import type { Deps } from '../deps';
import { Problem } from '../problem';
import { verifyPassword } from './passwords';
import { insertSession } from './sessions';
import { countTry, forgetTries } from './throttle';

const refused = () => new Problem(401, 'Not signed in', 'This address and password do not go together.');

/** As addresses are kept and counted. */
export const mailAddress = (typed: string) => typed.trim().toLowerCase().slice(0, 254);

/**
 * @returns the new session's token
 * @throws Problem 401 with the same words whether the address or the password is wrong; 429 after too many tries
 */
export async function signIn(
	deps: Deps,
	input: { email: string; password: string; address: string; userAgent: string | null }
): Promise<string> {
	const email = mailAddress(input.email);
	await countTry(deps, 'sign-in', email);
	await countTry(deps, 'sign-in-from', input.address);
	const row = await deps.pools.auth
		.selectFrom('auth.person as p')
		.innerJoin('auth.password as w', 'w.personId', 'p.id')
		.select(['p.id', 'p.clientId', 'w.hash', 'p.disabledAt'])
		.where('p.email', '=', email)
		.executeTakeFirst();
	const right = await verifyPassword(input.password, row && !row.disabledAt ? row.hash : null);
	if (!row || !right) throw refused();
	await forgetTries(deps, 'sign-in', email);
	return writingAccounts(deps.pools, { personId: row.id, clientId: row.clientId }, async (trx) => {
		// Checking took a while: whoever ended all sessions meanwhile, by a new password or by disabling, must have ended this one.
		const still = await trx
			.selectFrom('auth.person as p')
			.innerJoin('auth.password as w', 'w.personId', 'p.id')
			.select('p.id')
			.where('p.id', '=', row.id)
			.where('p.disabledAt', 'is', null)
			.where('w.hash', '=', row.hash)
			.forShare()
			.executeTakeFirst();
		if (!still) throw refused();
		return insertSession(trx, deps.now(), row.id, input.userAgent);
	});
}
