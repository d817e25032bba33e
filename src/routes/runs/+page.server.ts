import { listBuilds } from '$lib/server/builds';
import { listCells } from '$lib/server/cells';
import { listClients } from '$lib/server/clients';
import { listRuns, RunQuery } from '$lib/server/runs';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

const ROWS = 50;
const MOST_BUILDS = 200;

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'run.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		// An address that someone typed by hand with a wrong filter shows all, not an error page.
		const filters = RunQuery.safeParse(given).data ?? {};
		const [runs, builds, cells, clients] = await Promise.all([
			listRuns(locals.deps, who, { ...filters, limit: ROWS, cursor: given.cursor }),
			listBuilds(locals.deps, who, { limit: MOST_BUILDS, client: filters.client }),
			listCells(locals.deps, who),
			listClients(locals.deps, who)
		]);
		return {
			runs,
			filters,
			/** The address may name a build by its number; numbers are unique per client only. */
			build: builds.items.find(({ id, number }) => [id, number].includes(filters.build ?? ''))?.id ?? '',
			builds: builds.items.map(({ id, number, title }) => ({ id, number, title })),
			cells: cells.map(({ code, name, colour }) => ({ code, name, colour })),
			clients: clients.map(({ code, name }) => ({ code, name }))
		};
	});
};
