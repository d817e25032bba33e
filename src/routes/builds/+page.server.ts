import { BuildQuery, listBuilds } from '$lib/server/builds';
import { listEngines } from '$lib/server/engines';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'engine.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		const filters = BuildQuery.safeParse(given).data ?? {};
		const [builds, engines] = await Promise.all([
			listBuilds(locals.deps, who, { ...filters, limit: 50, cursor: given.cursor }),
			listEngines(locals.deps, who)
		]);
		return {
			builds,
			engines: engines.map(({ id, client, code, name }) => ({ id, client, code, name })),
			filters
		};
	});
};
