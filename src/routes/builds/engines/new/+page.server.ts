import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { listClients } from '$lib/server/clients';
import { createEngine, NewEngine } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { engineOf, NewEngineForm } from '../engine-form';

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'engine.write');
	return pageData({ locals }, async () => {
		const clients = await listClients(locals.deps, who);
		return {
			form: await superValidate(zod4(NewEngineForm), { errors: false }),
			clients: clients.map(({ code, name }) => ({ code, name }))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'engine.write');
		const form = await superValidate(request, zod4(NewEngineForm));
		if (!form.valid) return fail(400, { form });
		let id: string;
		try {
			const { client, code, ...rest } = form.data;
			const engine = NewEngine.parse({ client, code, ...engineOf(rest) });
			id = (await createEngine(locals.deps, who, engine)).id;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/builds/new?engine=${id}`);
	}
};
