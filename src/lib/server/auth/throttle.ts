import { RateLimiterPostgres, type RateLimiterRes } from 'rate-limiter-flexible';
import type pg from 'pg';
import { Problem } from '../problem';

const PER_ACCOUNT = { points: 10, duration: 15 * 60 };
const PER_ADDRESS = { points: 100, duration: 60 * 60 };

export interface SignInThrottle {
	/** Counts a try. @throws Problem 429 with the seconds to wait */
	count(email: string, address: string): Promise<void>;
	/** A right password clears the account's count. */
	clear(email: string): Promise<void>;
}

/** Kept in PostgreSQL, so that every replica counts the same tries. */
export function signInThrottle(pool: pg.Pool): SignInThrottle {
	const limiter = (keyPrefix: string, limits: { points: number; duration: number }) =>
		new RateLimiterPostgres({
			storeClient: pool,
			schemaName: 'auth',
			tableName: 'throttle',
			tableCreated: true,
			keyPrefix,
			...limits
		});
	const account = limiter('sign-in', PER_ACCOUNT);
	const from = limiter('sign-in-from', PER_ADDRESS);
	return {
		async count(email, address) {
			for (const [counter, key] of [
				[account, email],
				[from, address]
			] as const) {
				try {
					await counter.consume(key);
				} catch (refusal) {
					if (refusal instanceof Error) throw refusal;
					const waitS = Math.ceil((refusal as RateLimiterRes).msBeforeNext / 1000);
					throw new Problem(
						429,
						'Too many tries',
						`Too many sign-in tries. Wait ${Math.ceil(waitS / 60)} min, then try again.`,
						{},
						{ retryAfterS: waitS }
					);
				}
			}
		},
		async clear(email) {
			await account.delete(email);
		}
	};
}
