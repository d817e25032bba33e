import type { Handle, HandleServerError, RequestEvent, ServerInit } from '@sveltejs/kit';
import { redirect } from '@sveltejs/kit';
import { randomUUID } from 'node:crypto';
import { problemResponse } from '$lib/server/api';
import { principalOfSession, principalOfToken } from '$lib/server/auth';
import { log, readConfig } from '$lib/server/config';
import { closeDeps, openDeps, type Deps } from '$lib/server/deps';
import { problemOf } from '$lib/server/db';
import { closeEvents } from '$lib/server/events';
import { Problem } from '$lib/server/problem';
import { SESSION_COOKIE, isOpenRoute, isSecretRoute, loopbackDetour, perPrincipal } from '$lib/server/web';

let deps: Deps;

export const init: ServerInit = () => {
	deps = openDeps(readConfig(process.env));
	// An open stream is a request that never ends by itself: the adapter would wait for it.
	for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => void closeEvents(deps));
	// adapter-node has finished its last request when it says so.
	process.once('sveltekit:shutdown', () => void closeDeps(deps));
};

export const handle: Handle = async ({ event, resolve }) => {
	event.locals.deps = deps;
	event.locals.requestId = randomUUID();
	const theme = event.cookies.get('theme');
	event.locals.theme = theme === 'light' || theme === 'dark' ? theme : 'system';
	event.locals.who = null;
	const detour = loopbackDetour(deps.config.origin, event.request);
	if (detour) return secured(event, new Response(null, { status: 307, headers: { location: detour } }));
	try {
		event.locals.who = await principalOf(event);
		const refused = await gate(event);
		if (refused) return secured(event, refused);
	} catch (error) {
		const problem = problemOf(error);
		if (!problem) throw error;
		return secured(event, problemResponse(problem, event.locals.requestId));
	}
	const response = await resolve(event, {
		transformPageChunk: ({ html }) => html.replace('%theme%', event.locals.theme),
		filterSerializedResponseHeaders: (name) => name === 'content-type'
	});
	return secured(event, response);
};

async function principalOf(event: RequestEvent) {
	const authorization = event.request.headers.get('authorization');
	if (authorization !== null) {
		const token = /^Bearer +(\S+)$/i.exec(authorization)?.[1];
		const who = token ? await principalOfToken(deps, token) : null;
		if (!who) throw new Problem(401, 'Not signed in', 'This token is not known, or was revoked.');
		return who;
	}
	const cookie = event.cookies.get(SESSION_COOKIE);
	return cookie ? principalOfSession(deps, cookie) : null;
}

/** Checks that hold for every route; what a role may do is asked again in each load, action and operation. */
async function gate(event: RequestEvent): Promise<Response | null> {
	const { who, requestId } = event.locals;
	const isApi = event.url.pathname.startsWith('/api/');
	const changes = !['GET', 'HEAD', 'OPTIONS'].includes(event.request.method);
	// A cookie travels with requests that other sites make; a bearer token does not.
	if (changes && who?.via.kind !== 'token' && isForeign(event))
		return problemResponse(
			new Problem(403, 'Another site', 'This request came from another site and was refused.'),
			requestId
		);
	if (who) await perPrincipal(who);
	if (who || isOpenRoute(event.route.id, event.url.pathname)) return null;
	if (isApi)
		return problemResponse(new Problem(401, 'Not signed in', 'Send a bearer token, or sign in.'), requestId);
	if (event.route.id === null) return null;
	const back =
		event.request.method === 'GET' && !event.isDataRequest
			? `?to=${encodeURIComponent(event.url.pathname + event.url.search)}`
			: '';
	redirect(303, `/sign-in${back}`);
}

function isForeign(event: RequestEvent): boolean {
	const site = event.request.headers.get('sec-fetch-site');
	const origin = event.request.headers.get('origin');
	// A page that sends no Referer makes its own forms say `null`; what the browser says of the site is then what counts.
	if (origin === 'null' && site === 'same-origin') return false;
	if (origin !== null && origin !== event.url.origin) return true;
	if (site !== null && site !== 'same-origin') return true;
	if (site !== null || origin !== null) return false;
	// Neither header: no browser of today. Only a request that carries no cookie may pass.
	return event.locals.who !== null;
}

function secured(event: RequestEvent, response: Response): Response {
	const headers = response.headers;
	headers.set('x-request-id', event.locals.requestId);
	headers.set('x-content-type-options', 'nosniff');
	headers.set('referrer-policy', isSecretRoute(event.route.id) ? 'no-referrer' : 'same-origin');
	headers.set('x-frame-options', 'DENY');
	headers.set('cross-origin-opener-policy', 'same-origin');
	headers.set('cross-origin-resource-policy', 'same-origin');
	headers.set('permissions-policy', 'camera=(), microphone=(), geolocation=()');
	if (!event.url.pathname.startsWith('/_app/immutable/'))
		headers.set('cache-control', headers.get('cache-control') ?? 'no-store');
	if (event.locals.deps.config.origin.startsWith('https:'))
		headers.set('strict-transport-security', 'max-age=31536000');
	return response;
}

export const handleError: HandleServerError = ({ error, event, status, message }) => {
	const problem = problemOf(error);
	if (problem) return { message: problem.message, requestId: event.locals.requestId };
	const path = isSecretRoute(event.route.id) ? event.route.id : event.url.pathname;
	if (status !== 404) log.error({ err: error, requestId: event.locals.requestId, path }, 'request failed');
	return {
		message: status === 404 ? 'There is nothing at this address.' : message,
		requestId: event.locals.requestId
	};
};
