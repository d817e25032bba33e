import { redirect } from '@sveltejs/kit';
import { endSession } from '$lib/server/auth';
import { SESSION_COOKIE, sessionCookie } from '$lib/server/web';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ locals, cookies }) => {
	if (locals.who?.via.kind === 'session') await endSession(locals.deps, locals.who.via.id);
	cookies.delete(SESSION_COOKIE, sessionCookie(locals.deps.config));
	redirect(303, '/sign-in');
};
