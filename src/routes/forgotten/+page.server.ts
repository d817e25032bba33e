import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { askForReset } from '$lib/server/auth';
import { refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const Forgotten = z.object({
	email: z
		.string()
		.trim()
		.min(1, 'Type your mail address.')
		.max(254, 'This is too long for a mail address.')
		.regex(/^[^\s@]+@[^\s@]+$/, 'A mail address has a name, an @ and a place: name@place.example.')
});

export const load: PageServerLoad = async () => ({ form: await superValidate(zod4(Forgotten)) });

export const actions: Actions = {
	default: async ({ request, locals, getClientAddress }) => {
		const form = await superValidate(request, zod4(Forgotten));
		if (!form.valid) return fail(400, { form });
		try {
			await askForReset(locals.deps, form.data.email, getClientAddress());
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, asked: true };
	}
};
