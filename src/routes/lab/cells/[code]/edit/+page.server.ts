import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { CellChange, changeCell, getCell } from '$lib/server/cells';
import { listFuels } from '$lib/server/fuels';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { cellDraft, CellForm, cellOf, checkTyped, placeIssues } from '../../form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'cell.write');
	return pageData({ locals }, async () => {
		const [cell, fuels] = await Promise.all([
			getCell(locals.deps, who, params.code),
			listFuels(locals.deps, who)
		]);
		return {
			code: cell.code,
			form: await superValidate(cellDraft(cell), zod4(CellForm), { errors: false }),
			fuels: fuels.map(({ code, name }) => ({ code, name }))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'cell.write');
		const form = await superValidate(request, zod4(CellForm));
		if (!form.valid || !checkTyped(form)) return fail(400, { form });
		const change = CellChange.safeParse(cellOf(form.data));
		if (!change.success) {
			placeIssues(form, change.error.issues);
			return fail(400, { form });
		}
		try {
			await changeCell(locals.deps, who, params.code, change.data, form.data.version);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/cells/${encodeURIComponent(params.code)}`);
	}
};
