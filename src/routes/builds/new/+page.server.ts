import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { createBuild, getBuild, listBuilds } from '$lib/server/builds';
import { listEngines } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { partProblems, partsOf, partsText } from './parts';

const BuildForm = z.object({
	engine: z.string().min(1, 'Choose the engine.'),
	number: z
		.string()
		.trim()
		.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.'),
	title: z
		.string()
		.trim()
		.min(1, 'Say in a few words what this build is.')
		.max(200, 'At most 200 characters.'),
	parent: z.string().default(''),
	/** One part a line: name, colon, value. */
	parts: z
		.string()
		.max(20_000, 'At most 20 000 characters.')
		.default('')
		.superRefine((text, check) => {
			for (const message of partProblems(text)) check.addIssue({ code: 'custom', message });
		})
});

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'build.write');
	return pageData({ locals }, async () => {
		const [engines, builds] = await Promise.all([
			listEngines(locals.deps, who),
			listBuilds(locals.deps, who, { limit: 200 })
		]);
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
			form: await superValidate(start, zod4(BuildForm), { errors: false }),
			engines: engines.map(({ id, client, code, name }) => ({ id, client, code, name })),
			builds: builds.items.map(({ id, client, engine, number, title }) => ({
				id,
				client,
				engine,
				number,
				title
			}))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'build.write');
		const form = await superValidate(request, zod4(BuildForm));
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
