import { listCells } from '$lib/server/cells';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => ({ cells: await listCells(locals.deps, who) }));
};
