import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { endSession, holderOfLink, setPasswordByLink, type LinkKind } from '../auth';
import { SESSION_COOKIE, sessionCookie } from './session-cookie';
import { refused } from './forms';

const ChosenPassword = z
	.object({
		password: z.string().min(1, 'Choose a password.').max(1000, 'This is too long for a password.'),
		again: z.string().min(1, 'Type it once more, so that a slip of the finger shows.').max(1000)
	})
	.refine(({ password, again }) => password === again, {
		path: ['again'],
		message: 'This is not the same as above. Type both again.'
	});

type LinkEvent = RequestEvent<{ token: string }>;

/** The page behind a mailed link. Opening it uses nothing up, since mail scanners open links too; only the form does. */
export function linkPage(kind: LinkKind) {
	return {
		load: async ({ locals, params }: Pick<LinkEvent, 'locals' | 'params'>) => {
			const holder = await holderOfLink(locals.deps, kind, params.token);
			return {
				holder: holder && { name: holder.name, email: holder.email },
				form: await superValidate(zod4(ChosenPassword), { errors: false })
			};
		},
		choose: async ({ request, locals, params, cookies, getClientAddress }: LinkEvent) => {
			const form = await superValidate(request, zod4(ChosenPassword));
			const { password } = form.data;
			// What was typed in secret does not come back in the page.
			form.data = { password: '', again: '' };
			if (!form.valid) return fail(400, { form });
			try {
				await setPasswordByLink(locals.deps, kind, params.token, password, getClientAddress());
			} catch (cause) {
				return refused(form, cause);
			}
			// Whoever was signed in here is signed out: the next who signs in is the one who chose the password.
			if (locals.who?.via.kind === 'session') await endSession(locals.deps, locals.who.via.id);
			cookies.delete(SESSION_COOKIE, sessionCookie(locals.deps.config));
			redirect(303, '/sign-in?done=password');
		}
	};
}
