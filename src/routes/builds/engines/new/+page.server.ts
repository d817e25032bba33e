import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { INDUCTIONS } from '$lib/domain/model';
import { listClients } from '$lib/server/clients';
import { createEngine, NewEngine } from '$lib/server/engines';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const above = z.number({ error: 'Give a number.' }).positive('Must be above zero.');
/** Starts empty instead of at 0, and must not stay so. */
const needed = (rule: z.ZodNumber) =>
	rule
		.nullable()
		.default(null)
		.refine((value) => value !== null, 'Give a number.');
const EngineForm = z
	.object({
		client: z.string().min(1, 'Choose whose engine this is.'),
		code: z
			.string()
			.trim()
			.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.'),
		name: z.string().trim().min(1, 'Give it a name.').max(200, 'At most 200 characters.'),
		displacementL: needed(above.max(5000, 'In litres; this is too large.')),
		cylinders: needed(
			z
				.number({ error: 'Give a number.' })
				.int('Give a whole number.')
				.min(1, 'At least 1.')
				.max(64, 'At most 64.')
		),
		strokesPerCycle: z.enum(['2', '4']).default('4'),
		ignition: z.enum(['spark', 'compression']).default('spark'),
		induction: z.enum(['', ...INDUCTIONS]).default(''),
		inertiaKgM2: z
			.number({ error: 'Give a number.' })
			.min(0, 'Must not be negative.')
			.nullable()
			.default(null),
		compressionRatio: z
			.number({ error: 'Give a number.' })
			.gt(1, 'Must be above 1.')
			.max(50, 'Too large.')
			.nullable()
			.default(null),
		maxSpeedRpm: above.nullable().default(null)
	})
	.refine((engine) => engine.ignition === 'spark' || engine.induction, {
		path: ['induction'],
		error: 'A compression-ignition engine needs it: its correction depends on it.'
	});

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'engine.write');
	return pageData({ locals }, async () => {
		const clients = await listClients(locals.deps, who);
		return {
			form: await superValidate(zod4(EngineForm), { errors: false }),
			clients: clients.map(({ code, name }) => ({ code, name }))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'engine.write');
		const form = await superValidate(request, zod4(EngineForm));
		if (!form.valid) return fail(400, { form });
		let id: string;
		try {
			const { strokesPerCycle, induction, ...rest } = form.data;
			const engine = NewEngine.parse({
				...rest,
				strokesPerCycle: Number(strokesPerCycle),
				induction: induction || null
			});
			id = (await createEngine(locals.deps, who, engine)).id;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/builds/new?engine=${id}`);
	}
};
