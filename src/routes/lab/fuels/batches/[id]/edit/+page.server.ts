import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { changeFuelBatch, FuelBatchChange, getFuelBatch } from '$lib/server/fuels';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { BatchChangeForm, propertiesOf, typedProperties } from '../../../fuel-form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'fuel.write');
	return pageData({ locals }, async () => {
		const batch = await getFuelBatch(locals.deps, who, params.id);
		const start = { ...typedProperties(batch.properties), version: batch.version };
		return { batch, form: await superValidate(start, zod4(BatchChangeForm), { errors: false }) };
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'fuel.write');
		const form = await superValidate(request, zod4(BatchChangeForm));
		if (!form.valid) return fail(400, { form });
		const { reason, version, ...measured } = form.data;
		try {
			const change = FuelBatchChange.parse({ ...propertiesOf(measured), ...(reason ? { reason } : {}) });
			await changeFuelBatch(locals.deps, who, params.id, change, version);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/fuels/batches/${encodeURIComponent(params.id)}`);
	}
};
