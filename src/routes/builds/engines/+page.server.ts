import { listClients } from '$lib/server/clients';
import { EngineQuery, pageEngines } from '$lib/server/engines';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'engine.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		const filters = EngineQuery.omit({ limit: true }).safeParse(given).data ?? {};
		const [engines, clients] = await Promise.all([
			pageEngines(locals.deps, who, { ...filters, limit: 50 }),
			who.clientId ? [] : listClients(locals.deps, who)
		]);
		return { engines, clients: clients.map(({ code, name }) => ({ code, name })), filters };
	});
};
