import { fail } from '@sveltejs/kit';
import { z } from 'zod';
import { listAttachments } from '$lib/server/attachments';
import { buildHistory, changeBuild, followBuild, getBuild, getBuildRecord } from '$lib/server/builds';
import { listRuns } from '$lib/server/runs';
import { pageData, personMay } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url, depends }) => {
	const who = personMay(locals, 'engine.read');
	const { deps } = locals;
	depends('app:build');
	return pageData({ locals }, async () => {
		const build = await getBuild(deps, who, params.id);
		const [parent, runs, record, history, attachments] = await Promise.all([
			build.parentId ? getBuild(deps, who, build.parentId) : null,
			listRuns(deps, who, {
				build: build.id,
				limit: 25,
				cursor: url.searchParams.get('cursor') ?? undefined
			}),
			getBuildRecord(deps, who, build.id),
			buildHistory(deps, who, build.id),
			listAttachments(deps, who, { kind: 'build', ref: build.id })
		]);
		return { build, parent, runs, record, history, attachments };
	});
};

const StateForm = z.object({ state: z.enum(['in_preparation', 'ready', 'retired']) });

export const actions: Actions = {
	state: async ({ request, locals, params }) => {
		const who = personMay(locals, 'build.write');
		const given = StateForm.safeParse(Object.fromEntries(await request.formData()));
		if (!given.success) return fail(400, { problem: 'Choose one of the states.' });
		await pageData({ locals }, () => changeBuild(locals.deps, who, params.id, given.data, null));
		return { done: 'The state is changed.' };
	},
	follow: async ({ locals, params }) => {
		const who = personMay(locals, 'build.follow');
		await pageData({ locals }, () => followBuild(locals.deps, who, params.id, true));
		return { done: 'You are mailed when a run of this build is flagged.' };
	},
	unfollow: async ({ locals, params }) => {
		const who = personMay(locals, 'build.follow');
		await pageData({ locals }, () => followBuild(locals.deps, who, params.id, false));
		return { done: 'You are no longer mailed about this build.' };
	}
};
