import { RateLimiterPostgres, type RateLimiterRes } from 'rate-limiter-flexible';
import type { Deps } from '../deps';
import { Problem } from '../problem';

/** What is counted, by what, and how often in how many seconds. */
const LIMITS = {
	'sign-in': { points: 10, duration: 15 * 60, doing: 'sign-in tries' },
	'sign-in-from': { points: 100, duration: 60 * 60, doing: 'sign-in tries' },
	forgotten: { points: 5, duration: 60 * 60, doing: 'requests for a new password' },
	'forgotten-from': { points: 30, duration: 60 * 60, doing: 'requests for a new password' },
	'link-from': { points: 200, duration: 60 * 60, doing: 'tries' },
	'old-password': { points: 10, duration: 15 * 60, doing: 'tries with a wrong password' }
} as const;
type Counted = keyof typeof LIMITS;

const limiters = new WeakMap<Deps, Map<Counted, RateLimiterPostgres>>();

/** Kept in PostgreSQL, so that every replica counts the same tries. */
function limiterOf(deps: Deps, counted: Counted): RateLimiterPostgres {
	let own = limiters.get(deps);
	if (!own) limiters.set(deps, (own = new Map()));
	let limiter = own.get(counted);
	if (!limiter) {
		const { points, duration } = LIMITS[counted];
		limiter = new RateLimiterPostgres({
			storeClient: deps.pools.authPool,
			schemaName: 'auth',
			tableName: 'throttle',
			tableCreated: true,
			keyPrefix: counted,
			points,
			duration
		});
		own.set(counted, limiter);
	}
	return limiter;
}

/** Counts a try. @throws Problem 429 with the seconds to wait */
export async function countTry(deps: Deps, counted: Counted, key: string): Promise<void> {
	try {
		await limiterOf(deps, counted).consume(key);
	} catch (refusal) {
		if (refusal instanceof Error) throw refusal;
		const waitS = Math.ceil((refusal as RateLimiterRes).msBeforeNext / 1000);
		throw new Problem(
			429,
			'Too many tries',
			`Too many ${LIMITS[counted].doing}. Wait ${Math.ceil(waitS / 60)} min, then try again.`,
			{},
			{ retryAfterS: waitS }
		);
	}
}

/** What went well is not held against anyone. */
export async function forgetTries(deps: Deps, counted: Counted, key: string): Promise<void> {
	await limiterOf(deps, counted).delete(key);
}
