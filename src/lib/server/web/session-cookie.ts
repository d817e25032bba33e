import type { Config } from '../config';

export const SESSION_COOKIE = 'session';

/** Strict enough for a browser on plain loopback too: `Secure` as soon as the site is served by https. */
export function sessionCookie(config: Config) {
	return { path: '/', httpOnly: true, sameSite: 'lax', secure: config.origin.startsWith('https:') } as const;
}
