import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { listClients } from '$lib/server/clients';
import { createFuelBatch, listFuels, NewFuelBatch } from '$lib/server/fuels';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { NewBatchForm, propertiesOf } from '../../fuel-form';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'fuel.write');
	return pageData({ locals }, async () => {
		const [fuels, clients] = await Promise.all([listFuels(locals.deps, who), listClients(locals.deps, who)]);
		const asked = url.searchParams.get('fuel');
		const fuel = fuels.find(({ id, code }) => id === asked || code === asked)?.code ?? '';
		return {
			form: await superValidate({ fuel }, zod4(NewBatchForm), { errors: false }),
			fuels: fuels.map(({ code, name }) => ({ code, name })),
			clients: clients.map(({ code, name }) => ({ code, name }))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'fuel.write');
		const form = await superValidate(request, zod4(NewBatchForm));
		if (!form.valid) return fail(400, { form });
		const { fuel, code, client, ...measured } = form.data;
		let id: string;
		try {
			const batch = NewFuelBatch.parse({
				fuel,
				code,
				...propertiesOf(measured),
				...(client ? { client } : {})
			});
			id = (await createFuelBatch(locals.deps, who, batch)).id;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/fuels/batches/${id}`);
	}
};
