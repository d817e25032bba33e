import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { FLAG_SEVERITIES } from '$lib/domain/model';
import { may } from '$lib/server/access';
import { listAttachments } from '$lib/server/attachments';
import { followBuild, getBuild } from '$lib/server/builds';
import { getChecklist, listReadings } from '$lib/server/logbook';
import {
	acceptRun,
	addLogLine,
	closeRun,
	flagRun,
	getRun,
	listLogLines,
	runHistory,
	voidRun
} from '$lib/server/runs';
import { readCurve } from '$lib/server/traces';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const ReviewForm = z.object({ reason: z.string().trim().max(1000, 'At most 1000 characters.').default('') });
const VoidForm = z.object({
	reason: z.string().trim().min(1, 'Say why this run is set aside.').max(1000, 'At most 1000 characters.')
});
const FlagForm = z.object({
	reason: z.string().trim().min(1, 'Say what is wrong.').max(1000, 'At most 1000 characters.'),
	severity: z.enum(FLAG_SEVERITIES).default('review'),
	/** Of the stretch of the trace that it is about, s. */
	from: z.number().min(0).optional(),
	to: z.number().min(0).optional()
});
const LogForm = z.object({
	text: z.string().trim().min(1, 'Write something.').max(4000, 'At most 4000 characters.'),
	/** The lab's wall clock; empty: this moment. */
	at: z
		.string()
		.regex(/^(\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?)?$/, 'Give a day and a time.')
		.default(''),
	supersedes: z.string().default(''),
	reason: z.string().trim().max(1000, 'At most 1000 characters.').default('')
});

export const load: PageServerLoad = async ({ locals, params, depends }) => {
	const who = personMay(locals, 'run.read');
	const { deps } = locals;
	depends('app:run');
	return pageData({ locals }, async () => {
		const run = await getRun(deps, who, params.id);
		const [curve, log, history, attachments, checklist, readings, build] = await Promise.all([
			readCurve(deps, who, run.id),
			listLogLines(deps, who, run.id),
			runHistory(deps, who, run.id),
			listAttachments(deps, who, { kind: 'run', ref: run.id }),
			getChecklist(deps, who, run.id),
			listReadings(deps, who, run.id),
			getBuild(deps, who, run.buildId)
		]);
		const [acceptForm, voidForm, flagForm, logForm] = await Promise.all([
			superValidate(zod4(ReviewForm), { id: 'accept', errors: false }),
			superValidate(zod4(VoidForm), { id: 'void', errors: false }),
			superValidate(zod4(FlagForm), { id: 'flag', errors: false }),
			superValidate(zod4(LogForm), { id: 'log', errors: false })
		]);
		return {
			run,
			curve,
			log,
			history,
			attachments,
			checklist,
			readings,
			following: build.following,
			acceptForm,
			voidForm,
			flagForm,
			logForm,
			/** Nobody accepts a run that they logged themselves. */
			mayAccept: may(who, 'run.review') && run.loggedById !== who.personId
		};
	});
};

export const actions: Actions = {
	close: async ({ locals, params }) => {
		const who = personMay(locals, 'run.open');
		await pageData({ locals }, () => closeRun(locals.deps, who, params.id, null));
		return { done: 'The record is closed.' };
	},
	accept: async ({ request, locals, params }) => {
		const who = personMay(locals, 'run.review');
		const form = await superValidate(request, zod4(ReviewForm), { id: 'accept' });
		if (!form.valid) return fail(400, { form });
		try {
			await acceptRun(locals.deps, who, params.id, form.data.reason || undefined, null);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'The run is accepted.' };
	},
	void: async ({ request, locals, params }) => {
		const who = personMay(locals, 'run.review');
		const form = await superValidate(request, zod4(VoidForm), { id: 'void' });
		if (!form.valid) return fail(400, { form });
		try {
			await voidRun(locals.deps, who, params.id, form.data.reason, null);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'The run is void.' };
	},
	flag: async ({ request, locals, params }) => {
		const who = personMay(locals, 'run.flag');
		const form = await superValidate(request, zod4(FlagForm), { id: 'flag' });
		if (!form.valid) return fail(400, { form });
		try {
			await flagRun(locals.deps, who, params.id, form.data, null);
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'The flag is raised.' };
	},
	log: async ({ request, locals, params }) => {
		const who = personMay(locals, 'run.log');
		const form = await superValidate(request, zod4(LogForm), { id: 'log' });
		if (!form.valid) return fail(400, { form });
		try {
			const { text, at, supersedes, reason } = form.data;
			await addLogLine(locals.deps, who, params.id, {
				text,
				...(at ? { at: labInstant(locals.deps.config, at, 'at') } : {}),
				...(supersedes ? { supersedes, reason: reason || undefined } : {})
			});
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'The line is logged.' };
	},
	follow: ({ locals, params }) => follow(locals, params.id, true),
	unfollow: ({ locals, params }) => follow(locals, params.id, false)
};

/** The build is followed, and with it this run and the next ones. */
async function follow(locals: App.Locals, ref: string, isFollowing: boolean) {
	const who = personMay(locals, 'build.follow');
	await pageData({ locals }, async () => {
		const { buildId } = await getRun(locals.deps, who, ref);
		return followBuild(locals.deps, who, buildId, isFollowing);
	});
	return {
		done: isFollowing
			? 'You are mailed when a run of this build is flagged.'
			: 'You are no longer mailed about this build.'
	};
}
