import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import {
	changeMe,
	changePassword,
	createToken,
	endOwnSessions,
	listSessions,
	listTokens,
	readMe,
	revokeToken
} from '$lib/server/auth';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const TokenForm = z.object({
	label: z.string().trim().min(1, 'Say what will use this token.').max(80, 'At most 80 characters.')
});
const MeForm = z.object({
	name: z.string().trim().min(1, 'Give your name.').max(120, 'At most 120 characters.'),
	units: z.enum(['si', 'us'])
});
const PasswordForm = z.object({
	old: z.string().min(1, 'Type your present password.').max(1000, 'This is too long for a password.'),
	new: z.string().min(1, 'Type a new password.').max(1000, 'This is too long for a password.')
});

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'account.own');
	const [{ name, units, email, role }, tokens, sessions] = await Promise.all([
		readMe(locals.deps, who),
		listTokens(locals.deps, who),
		listSessions(locals.deps, who)
	]);
	const quiet = { errors: false };
	return {
		account: { name, email, role },
		tokens,
		sessions,
		form: await superValidate(zod4(TokenForm), { ...quiet, id: 'token' }),
		me: await superValidate({ name, units }, zod4(MeForm), { ...quiet, id: 'me' }),
		password: await superValidate(zod4(PasswordForm), { ...quiet, id: 'password' })
	};
};

export const actions: Actions = {
	create: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const form = await superValidate(request, zod4(TokenForm), { id: 'token' });
		if (!form.valid) return fail(400, { form });
		try {
			return { form, token: await createToken(locals.deps, who, form.data.label) };
		} catch (cause) {
			return refused(form, cause);
		}
	},
	revoke: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const id = z.uuid().safeParse((await request.formData()).get('id'));
		if (!id.success) return fail(400, { problem: 'This token is not known.' });
		await pageData({ locals }, () => revokeToken(locals.deps, who, id.data));
		return { done: 'The token is revoked; it opens nothing any more.' };
	},
	me: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const form = await superValidate(request, zod4(MeForm), { id: 'me' });
		if (!form.valid) return fail(400, { form });
		try {
			await changeMe(locals.deps, who, form.data);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'Saved. Figures are shown in the units you chose.' };
	},
	password: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const form = await superValidate(request, zod4(PasswordForm), { id: 'password' });
		const typed = { ...form.data };
		// What was typed in secret does not come back in the page.
		form.data = { old: '', new: '' };
		if (!form.valid) return fail(400, { form });
		try {
			await changePassword(locals.deps, who, typed);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'The password is changed. Your other sessions have ended.' };
	},
	end: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const id = z
			.string()
			.max(100)
			.optional()
			.safeParse((await request.formData()).get('id') ?? undefined);
		if (!id.success) return fail(400, { problem: 'This session is not known.' });
		const ended = await pageData({ locals }, () => endOwnSessions(locals.deps, who, id.data));
		return { done: ended === 1 ? 'The session has ended.' : `${ended} sessions have ended.` };
	}
};
