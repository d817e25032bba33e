import { listFuelBatches, listFuels } from '$lib/server/fuels';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => {
		const [fuels, batches] = await Promise.all([
			listFuels(locals.deps, who),
			listFuelBatches(locals.deps, who, { limit: 50, cursor: url.searchParams.get('cursor') ?? undefined })
		]);
		return { fuels, batches };
	});
};
