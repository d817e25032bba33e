import { fuelHistory, getFuel, listFuelBatches } from '$lib/server/fuels';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const who = personMay(locals, 'lab.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const fuel = await getFuel(deps, who, params.id);
		const cursor = url.searchParams.get('cursor') ?? undefined;
		const [batches, history] = await Promise.all([
			listFuelBatches(deps, who, { fuel: fuel.id, limit: 50, sort: '-added', cursor }),
			// The lab's own affair: clients read what the fuel is, not who changed it.
			who.clientId ? null : fuelHistory(deps, who, fuel.id)
		]);
		return { fuel, batches, history };
	});
};
