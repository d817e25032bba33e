import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { createToken, listTokens, revokeToken } from '$lib/server/auth';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const TokenForm = z.object({
	label: z.string().trim().min(1, 'Say what will use this token.').max(80, 'At most 80 characters.')
});

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'account.own');
	return {
		account: { name: who.name, email: who.email, role: who.role },
		tokens: await listTokens(locals.deps, who),
		form: await superValidate(zod4(TokenForm), { errors: false })
	};
};

export const actions: Actions = {
	create: async ({ request, locals }) => {
		const who = personMay(locals, 'account.own');
		const form = await superValidate(request, zod4(TokenForm));
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
	}
};
