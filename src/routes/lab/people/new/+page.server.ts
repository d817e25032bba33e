import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { ROLES } from '$lib/server/access';
import { listClients } from '$lib/server/clients';
import { invitePerson, NewPerson } from '$lib/server/people';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const InviteForm = z.object({
	email: z.string().trim().min(1, 'Give a mail address.').max(254, 'This is too long for a mail address.'),
	name: z.string().trim().min(1, 'Give the person’s name.').max(120, 'At most 120 characters.'),
	role: z.string().refine((role) => (ROLES as readonly string[]).includes(role), 'Choose a role.'),
	client: z.string().max(64, 'Choose a client.').default('')
});

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'person.admin');
	return pageData({ locals }, async () => ({
		clients: (await listClients(locals.deps, who)).map(({ code, name }) => ({ code, name })),
		form: await superValidate(zod4(InviteForm), { errors: false })
	}));
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'person.admin');
		const form = await superValidate(request, zod4(InviteForm));
		if (!form.valid) return fail(400, { form });
		const { client, ...person } = form.data;
		let id: string;
		try {
			// A client that was chosen before the role was changed is not meant.
			const asked = NewPerson.parse({
				...person,
				client: person.role === 'client' && client ? client : undefined
			});
			({ id } = await invitePerson(locals.deps, who, asked));
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/people/${id}?invited`);
	}
};
