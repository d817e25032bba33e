import { listClients } from '$lib/server/clients';
import { FuelBatchQuery, listFuelBatches, listFuels } from '$lib/server/fuels';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		const filters = FuelBatchQuery.safeParse(given).data ?? {};
		const [fuels, batches, clients] = await Promise.all([
			listFuels(locals.deps, who),
			listFuelBatches(locals.deps, who, { ...filters, limit: 50, cursor: given.cursor }),
			listClients(locals.deps, who)
		]);
		return { fuels, batches, clients: clients.map(({ code, name }) => ({ code, name })), filters };
	});
};
