import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { endSession, signIn } from '$lib/server/auth';
import { refused, SESSION_COOKIE, sessionCookie } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const SignIn = z.object({
	email: z.string().trim().min(1, 'Type your mail address.').max(254, 'This is too long for a mail address.'),
	password: z.string().min(1, 'Type your password.').max(1000, 'This is too long for a password.')
});

/** Only a path of ours: a full address here would send people elsewhere after they typed a password. */
function wayBack(url: URL): string {
	const to = url.searchParams.get('to') ?? '/';
	return /^\/(?![/\\])/.test(to) ? to : '/';
}

export const load: PageServerLoad = async ({ locals, url }) => {
	if (locals.who) redirect(303, wayBack(url));
	return { form: await superValidate(zod4(SignIn)) };
};

export const actions: Actions = {
	default: async ({ request, locals, cookies, url, getClientAddress }) => {
		const form = await superValidate(request, zod4(SignIn));
		if (!form.valid) return fail(400, { form });
		let token: string;
		try {
			token = await signIn(locals.deps, {
				...form.data,
				address: getClientAddress(),
				userAgent: request.headers.get('user-agent')
			});
		} catch (cause) {
			form.data.password = '';
			return refused(form, cause);
		}
		// Who was signed in here before is signed out: a session never passes from one person to another.
		if (locals.who?.via.kind === 'session') await endSession(locals.deps, locals.who.via.id);
		cookies.set(SESSION_COOKIE, token, { ...sessionCookie(locals.deps.config), maxAge: 12 * 3600 });
		redirect(303, wayBack(url));
	}
};
