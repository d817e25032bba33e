import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { createBuild, listBuilds } from '$lib/server/builds';
import { listEngines } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

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
	parts: z.string().max(20_000, 'At most 20 000 characters.').default('')
});

function partsOf(text: string): { name: string; value: string }[] {
	return text
		.split('\n')
		.map((line) => line.trim())
		.filter(Boolean)
		.map((line) => {
			const colon = line.indexOf(':');
			return colon < 0
				? { name: line.slice(0, 80), value: '' }
				: {
						name: line.slice(0, colon).trim().slice(0, 80),
						value: line
							.slice(colon + 1)
							.trim()
							.slice(0, 500)
					};
		})
		.filter((part) => part.name);
}

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'build.write');
	return pageData({ locals }, async () => {
		const [engines, builds] = await Promise.all([
			listEngines(locals.deps, who),
			listBuilds(locals.deps, who, { limit: 200 })
		]);
		const start = {
			engine: url.searchParams.get('engine') ?? '',
			parent: url.searchParams.get('parent') ?? ''
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
