import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { changeFuel, getFuel } from '$lib/server/fuels';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { FuelChangeForm, fuelOf, typedFuel } from '../../fuel-form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'fuel.write');
	return pageData({ locals }, async () => {
		const fuel = await getFuel(locals.deps, who, params.id);
		return { fuel, form: await superValidate(typedFuel(fuel), zod4(FuelChangeForm), { errors: false }) };
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'fuel.write');
		const form = await superValidate(request, zod4(FuelChangeForm));
		if (!form.valid) return fail(400, { form });
		try {
			await changeFuel(locals.deps, who, params.id, fuelOf(form.data), form.data.version);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/fuels/${encodeURIComponent(params.id)}`);
	}
};
