import { listLimitSets } from '$lib/server/limits';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => ({ limitSets: await listLimitSets(locals.deps, who) }));
};
