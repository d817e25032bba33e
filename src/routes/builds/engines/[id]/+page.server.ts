import { engineHours, listBuilds } from '$lib/server/builds';
import { engineBehind, engineHistory, getEngine, recomputeEngine } from '$lib/server/engines';
import { pageData, personMay } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const who = personMay(locals, 'engine.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const engine = await getEngine(deps, who, params.id);
		const cursor = url.searchParams.get('cursor') ?? undefined;
		const [builds, hours, behind, history] = await Promise.all([
			listBuilds(deps, who, { engine: engine.id, limit: 25, cursor }),
			engineHours(deps, who, engine.id),
			engineBehind(deps, who, engine.id),
			engineHistory(deps, who, engine.id)
		]);
		return { engine, builds, hours, behind, history };
	});
};

export const actions: Actions = {
	recompute: async ({ locals, params }) => {
		const who = personMay(locals, 'engine.write');
		const { runs } = await pageData({ locals }, () => recomputeEngine(locals.deps, who, params.id));
		return { done: `${runs === 1 ? 'One run is' : `${runs} runs are`} being computed again.` };
	}
};
