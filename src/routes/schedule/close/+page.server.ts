import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { closeCell } from '$lib/server/bookings';
import { listCells } from '$lib/server/cells';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const WALL_CLOCK = /^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/;
const ClosureForm = z.object({
	cell: z.string().min(1, 'Choose the cell.'),
	from: z.string().regex(WALL_CLOCK, 'Give the day and time from which the cell is closed.'),
	to: z.string().regex(WALL_CLOCK, 'Give the day and time at which it opens again.'),
	title: z
		.string()
		.trim()
		.min(1, 'Say what for: service, calibration, a visit.')
		.max(120, 'At most 120 characters.')
});

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'closure.write');
	return pageData({ locals }, async () => {
		const cells = await listCells(locals.deps, who);
		const asked = (name: string) => url.searchParams.get(name) ?? '';
		const askedTime = (name: string) => (WALL_CLOCK.test(asked(name)) ? asked(name) : '');
		const start = {
			cell: cells.find(({ code }) => code === asked('cell'))?.code ?? '',
			from: askedTime('from'),
			to: askedTime('to')
		};
		return {
			form: await superValidate(start, zod4(ClosureForm), { errors: false }),
			cells: cells.map(({ code, name }) => ({ code, name }))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'closure.write');
		const { deps } = locals;
		const form = await superValidate(request, zod4(ClosureForm));
		if (!form.valid) return fail(400, { form });
		const { cell, from, to, title } = form.data;
		try {
			await closeCell(deps, who, {
				cell,
				title,
				from: labInstant(deps.config, from, 'from'),
				to: labInstant(deps.config, to, 'to')
			});
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/schedule?${new URLSearchParams({ view: 'week', date: from.slice(0, 10) }).toString()}`);
	}
};
