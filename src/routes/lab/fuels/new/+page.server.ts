import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { createFuel } from '$lib/server/fuels';
import { personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { fuelOf, NewFuelForm } from '../fuel-form';

export const load: PageServerLoad = async ({ locals }) => {
	personMay(locals, 'fuel.write');
	return { form: await superValidate(zod4(NewFuelForm), { errors: false }) };
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'fuel.write');
		const form = await superValidate(request, zod4(NewFuelForm));
		if (!form.valid) return fail(400, { form });
		let id: string;
		try {
			id = (await createFuel(locals.deps, who, { code: form.data.code, ...fuelOf(form.data) })).id;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/fuels/${id}`);
	}
};
