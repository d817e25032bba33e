import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { emptyRule } from '$lib/domain/limits/rule-draft';
import { listClients } from '$lib/server/clients';
import { createLimitSet, NewLimitSet } from '$lib/server/limits';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { judged, LimitSetForm } from '../form';

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'limits.write');
	return pageData({ locals }, async () => ({
		form: await superValidate({ rules: [emptyRule()] }, zod4(LimitSetForm), { errors: false }),
		clients: (await listClients(locals.deps, who)).map(({ code, name }) => ({ code, name }))
	}));
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'limits.write');
		const form = await superValidate(request, zod4(LimitSetForm));
		if (!form.valid) return fail(400, { form });
		const { client, code, title } = form.data;
		const set = judged(form, NewLimitSet, { code, title, ...(client ? { client } : {}) });
		if (!set) return fail(400, { form });
		let id: string;
		try {
			({ id } = await createLimitSet(locals.deps, who, set));
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/limits/${id}`);
	}
};
