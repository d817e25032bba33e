import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { createCell, NewCell } from '$lib/server/cells';
import { listFuels } from '$lib/server/fuels';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { CellForm, cellOf, chainOf, checkTyped, placeIssues } from '../form';

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'cell.write');
	return pageData({ locals }, async () => ({
		form: await superValidate(zod4(CellForm), { errors: false }),
		fuels: (await listFuels(locals.deps, who)).map(({ code, name }) => ({ code, name }))
	}));
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'cell.write');
		const form = await superValidate(request, zod4(CellForm));
		if (!form.valid || !checkTyped(form)) return fail(400, { form });
		const cell = NewCell.safeParse({ code: form.data.code, ...cellOf(form.data), ...chainOf(form.data) });
		if (!cell.success) {
			placeIssues(form, cell.error.issues);
			return fail(400, { form });
		}
		try {
			await createCell(locals.deps, who, cell.data);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/cells/${encodeURIComponent(cell.data.code)}`);
	}
};
