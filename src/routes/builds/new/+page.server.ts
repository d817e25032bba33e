import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { partsOf, partsText } from '$lib/domain/builds/parts-text';
import { createBuild, getBuild } from '$lib/server/builds';
import { listEngines } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { NewBuildForm } from '../build-form';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'build.write');
	return pageData({ locals }, async () => {
		const engines = await listEngines(locals.deps, who);
		const parentRef = url.searchParams.get('parent');
		// A child starts with its parent's parts, so that only what differs has to be typed.
		const parent = parentRef ? await getBuild(locals.deps, who, parentRef) : null;
		const engineRef = parent?.engine ?? url.searchParams.get('engine');
		const engine = engines.find(
			({ id, client, code }) =>
				id === engineRef || (code === engineRef && (!parent || client === parent.client))
		);
		const start = {
			engine: engine?.id ?? '',
			parent: parent?.id ?? '',
			parts: partsText(parent?.parts ?? [])
		};
		return {
			form: await superValidate(start, zod4(NewBuildForm), { errors: false }),
			engines: engines.map(({ id, client, code, name }) => ({ id, client, code, name })),
			parent: parent && { id: parent.id, code: parent.number, text: parent.title }
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'build.write');
		const form = await superValidate(request, zod4(NewBuildForm));
		if (!form.valid) return fail(400, { form });
		let id: string;
		try {
			const { parent, parts, ...rest } = form.data;
			id = (await createBuild(locals.deps, who, { ...rest, parent: parent || null, parts: partsOf(parts) }))
				.id;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/builds/${id}`);
	}
};
