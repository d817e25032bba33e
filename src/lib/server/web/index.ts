import { error, type RequestEvent } from '@sveltejs/kit';
import { RateLimiterMemory } from 'rate-limiter-flexible';
import { requireMay, type Action, type Principal } from '../access';
import { problemOf } from '../db';
import { Problem } from '../problem';

/** Their address is itself a secret: it goes into no log and into no Referer. */
const SECRET_ROUTES = new Set(['/invitation/[token]', '/reset/[token]']);
const OPEN_ROUTES = new Set([
	'/sign-in',
	'/forgotten',
	...SECRET_ROUTES,
	'/api/v1/health',
	'/api/v1/openapi.json',
	'/readyz',
	'/theme'
]);

export const isSecretRoute = (routeId: string | null): boolean =>
	routeId !== null && SECRET_ROUTES.has(routeId);

/** Routes that answer before anyone is known. */
export function isOpenRoute(routeId: string | null, pathname: string): boolean {
	return (routeId !== null && OPEN_ROUTES.has(routeId)) || pathname.startsWith('/_app/');
}

const REQUESTS_PER_MINUTE = 3000;
const limiter = new RateLimiterMemory({ points: REQUESTS_PER_MINUTE, duration: 60 });

/** @throws Problem 429 for a person or token that asks without pause */
export async function perPrincipal(who: Principal): Promise<void> {
	try {
		await limiter.consume(who.via.id);
	} catch {
		throw new Problem(
			429,
			'Too many requests',
			`At most ${REQUESTS_PER_MINUTE} requests a minute.`,
			{},
			{ retryAfterS: 10 }
		);
	}
}

/** The signed-in person of a page request, if their role may do this. */
export function personMay(locals: App.Locals, action: Action): Principal {
	if (!locals.who) error(401, 'Sign in first.');
	try {
		requireMay(locals.who, action);
	} catch (cause) {
		if (cause instanceof Problem) error(cause.status, cause.message);
		throw cause;
	}
	return locals.who;
}

/** Runs a page's reads; an expected refusal becomes that page's error, anything else stays a bug. */
export async function pageData<T>(event: Pick<RequestEvent, 'locals'>, work: () => Promise<T>): Promise<T> {
	try {
		return await work();
	} catch (cause) {
		const problem = problemOf(cause);
		if (!problem) throw cause;
		error(problem.status, { message: problem.message, requestId: event.locals.requestId });
	}
}
export { refused } from './forms';
export { labInstant } from './clock';
export { linkPage } from './link-page';
export { loopbackDetour } from './loopback';
export { SESSION_COOKIE, sessionCookie } from './session-cookie';
