import type { Deps } from '../deps';
import { Problem } from '../problem';
import { verifyPassword } from './passwords';
import { startSession } from './sessions';
import { signInThrottle, type SignInThrottle } from './throttle';

const throttles = new WeakMap<Deps, SignInThrottle>();

/**
 * @returns the new session's token
 * @throws Problem 401 with the same words whether the address or the password is wrong; 429 after too many tries
 */
export async function signIn(
	deps: Deps,
	input: { email: string; password: string; address: string; userAgent: string | null }
): Promise<string> {
	let throttle = throttles.get(deps);
	if (!throttle) throttles.set(deps, (throttle = signInThrottle(deps.pools.authPool)));
	const email = input.email.trim().toLowerCase().slice(0, 254);
	await throttle.count(email, input.address);
	const row = await deps.pools.auth
		.selectFrom('auth.person as p')
		.innerJoin('auth.password as w', 'w.personId', 'p.id')
		.select(['p.id', 'w.hash', 'p.disabledAt'])
		.where('p.email', '=', email)
		.executeTakeFirst();
	const right = await verifyPassword(input.password, row && !row.disabledAt ? row.hash : null);
	if (!row || !right)
		throw new Problem(401, 'Not signed in', 'This address and password do not go together.');
	await throttle.clear(email);
	return startSession(deps, row.id, input.userAgent);
}
