import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { createClient, listClients } from '$lib/server/clients';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const ClientForm = z.object({
	code: z
		.string()
		.trim()
		.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.'),
	name: z.string().trim().min(1, 'Give the client’s name.').max(200, 'At most 200 characters.')
});

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'client.read');
	return pageData({ locals }, async () => ({
		clients: await listClients(locals.deps, who),
		form: await superValidate(zod4(ClientForm), { errors: false })
	}));
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'client.create');
		const form = await superValidate(request, zod4(ClientForm));
		if (!form.valid) return fail(400, { form });
		try {
			await createClient(locals.deps, who, form.data);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: `${form.data.name} is added.` };
	}
};
