import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { changeEngine, EngineChange, getEngine } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { EngineChangeForm, engineOf, typedOf } from '../../engine-form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'engine.write');
	return pageData({ locals }, async () => {
		const engine = await getEngine(locals.deps, who, params.id);
		const start = { ...typedOf(engine), version: engine.version };
		return { engine, form: await superValidate(start, zod4(EngineChangeForm), { errors: false }) };
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'engine.write');
		const form = await superValidate(request, zod4(EngineChangeForm));
		if (!form.valid) return fail(400, { form });
		const { version, reason, ...typed } = form.data;
		try {
			const change = EngineChange.parse({ ...engineOf(typed), reason: reason || undefined });
			await changeEngine(locals.deps, who, params.id, change, version);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/builds/engines/${encodeURIComponent(params.id)}`);
	}
};
