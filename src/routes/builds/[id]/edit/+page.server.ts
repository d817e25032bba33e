import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { partsOf, partsText } from '$lib/domain/builds/parts-text';
import { changeBuild, getBuild } from '$lib/server/builds';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { BuildChangeForm } from '../../build-form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'build.write');
	return pageData({ locals }, async () => {
		const build = await getBuild(locals.deps, who, params.id);
		const start = { title: build.title, parts: partsText(build.parts), version: build.version };
		return { build, form: await superValidate(start, zod4(BuildChangeForm), { errors: false }) };
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'build.write');
		const form = await superValidate(request, zod4(BuildChangeForm));
		if (!form.valid) return fail(400, { form });
		const { title, parts, version } = form.data;
		try {
			await changeBuild(locals.deps, who, params.id, { title, parts: partsOf(parts) }, version);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/builds/${encodeURIComponent(params.id)}`);
	}
};
