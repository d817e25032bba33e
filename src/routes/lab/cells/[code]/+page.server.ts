import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { spanInWords } from '$lib/domain/scheduling';
import { may } from '$lib/server/access';
import { closeCell, removeClosure } from '$lib/server/bookings';
import { getCell, listTorqueChain, recomputeCell, runsBehind } from '$lib/server/cells';
import { problemOf } from '$lib/server/db';
import { readSchedule } from '$lib/server/schedule';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const DAYS_AHEAD = 60;
const moment = z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/, 'Give the date and time.');
const ClosureForm = z.object({
	from: moment,
	to: moment,
	title: z.string().trim().min(1, 'Say what for.').max(120, 'At most 120 characters.')
});

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'lab.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const cell = await getCell(deps, who, params.code);
		const from = deps.now();
		const to = new Date(from.getTime() + DAYS_AHEAD * 86_400_000);
		const mayWrite = may(who, 'cell.write');
		const [versions, behind, schedule, closeForm] = await Promise.all([
			listTorqueChain(deps, who, cell.id),
			mayWrite ? runsBehind(deps, who, cell.id) : null,
			may(who, 'schedule.read')
				? readSchedule(deps, who, { from: from.toISOString(), to: to.toISOString() })
				: null,
			superValidate(zod4(ClosureForm), { id: 'close', errors: false })
		]);
		return {
			cell,
			versions,
			behind,
			daysAhead: DAYS_AHEAD,
			entries: schedule?.cells.find(({ code }) => code === cell.code)?.entries ?? [],
			closeForm
		};
	});
};

export const actions: Actions = {
	close: async ({ request, locals, params }) => {
		const who = personMay(locals, 'closure.write');
		const form = await superValidate(request, zod4(ClosureForm), { id: 'close' });
		if (!form.valid) return fail(400, { form });
		const { deps } = locals;
		try {
			const from = labInstant(deps.config, form.data.from, 'from');
			const to = labInstant(deps.config, form.data.to, 'to');
			await closeCell(deps, who, { cell: params.code, from, to, title: form.data.title });
			const when = spanInWords({ from, to }, deps.config.labTimeZone);
			return { form, done: `${params.code} is closed ${when}.` };
		} catch (cause) {
			return refused(form, cause);
		}
	},
	open: async ({ request, locals }) => {
		const who = personMay(locals, 'closure.write');
		const closure = String((await request.formData()).get('closure') ?? '');
		return told(async () => {
			await removeClosure(locals.deps, who, closure);
			return 'The closure is removed.';
		});
	},
	recompute: async ({ locals, params }) => {
		const who = personMay(locals, 'cell.write');
		return told(async () => {
			const { traces } = await recomputeCell(locals.deps, who, params.code);
			return `${traces} ${traces === 1 ? 'trace is' : 'traces are'} being computed again.`;
		});
	}
};

/** What a form without fields did, or why not, as a sentence over the page. */
async function told(work: () => Promise<string>) {
	try {
		return { done: await work() };
	} catch (cause) {
		const problem = problemOf(cause);
		if (!problem) throw cause;
		return fail(problem.status, { problem: problem.message });
	}
}
