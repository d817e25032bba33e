import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { wallClock } from '$lib/domain/time';
import { addTorqueChain, getCell, NewTorqueChain, runsTouchedBy } from '$lib/server/cells';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { chainDraft, ChainForm, chainOf, placeIssues } from '../../../form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'cell.write');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const cell = await getCell(deps, who, params.code);
		const start = {
			...chainDraft(cell),
			validFrom: wallClock(deps.now(), deps.config.labTimeZone).slice(0, 16),
			reason: ''
		};
		return {
			code: cell.code,
			inForce: cell.torqueChainVersion,
			form: await superValidate(start, zod4(ChainForm), { errors: false })
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'cell.write');
		const { deps } = locals;
		const form = await superValidate(request, zod4(ChainForm));
		if (!form.valid) return fail(400, { form });
		const chain = NewTorqueChain.omit({ validFrom: true }).safeParse({
			...chainOf(form.data),
			reason: form.data.reason,
			recompute: form.data.past === 'recompute'
		});
		if (!chain.success) {
			placeIssues(form, chain.error.issues);
			return fail(400, { form });
		}
		try {
			const validFrom = labInstant(deps.config, form.data.validFrom, 'validFrom');
			if (form.data.past === '') {
				// Figures of the past are never changed, nor left behind, without a word.
				const touched = await runsTouchedBy(deps, who, params.code, validFrom);
				if (touched.runs > 0) return fail(409, { form, touched, touchedFrom: form.data.validFrom });
			}
			await addTorqueChain(deps, who, params.code, { ...chain.data, validFrom }, null);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/cells/${encodeURIComponent(params.code)}#torque-chain`);
	}
};
