import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { METRIC_CODES } from '$lib/domain/display/labels';
import { draftOf } from '$lib/domain/limits/rule-draft';
import { addLimitSetVersion, getLimitSet, NewLimitSetVersion } from '$lib/server/limits';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { judged, VersionForm } from '../../form';

const isListedMetric = (code: string) => METRIC_CODES.includes(code);

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'limits.write');
	return pageData({ locals }, async () => {
		const { id, code, title, version, rules } = await getLimitSet(locals.deps, who, params.code);
		const start = { version, inForceFrom: '', rules: rules.map((rule) => draftOf(rule, isListedMetric)) };
		return {
			set: { id, code, title, version },
			form: await superValidate(start, zod4(VersionForm), { errors: false })
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const who = personMay(locals, 'limits.write');
		const form = await superValidate(request, zod4(VersionForm));
		if (!form.valid) return fail(400, { form });
		const version = judged(form, NewLimitSetVersion, {});
		if (!version) return fail(400, { form });
		const { inForceFrom } = form.data;
		try {
			await addLimitSetVersion(
				locals.deps,
				who,
				params.code,
				inForceFrom
					? { ...version, inForceFrom: labInstant(locals.deps.config, inForceFrom, 'inForceFrom') }
					: version,
				form.data.version
			);
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/lab/limits/${encodeURIComponent(params.code)}`);
	}
};
