import { listCells } from '$lib/server/cells';
import { listClients } from '$lib/server/clients';
import { listRuns, RunQuery } from '$lib/server/runs';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

const ROWS = 50;

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'run.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		// An address that someone typed by hand with a wrong filter shows all, not an error page.
		const filters = RunQuery.safeParse(given).data ?? {};
		const [runs, cells, clients] = await Promise.all([
			listRuns(locals.deps, who, { ...filters, limit: ROWS, cursor: given.cursor }),
			listCells(locals.deps, who),
			listClients(locals.deps, who)
		]);
		return {
			runs,
			filters,
			cells: cells.map(({ code, name, colour }) => ({ code, name, colour })),
			clients: clients.map(({ code, name }) => ({ code, name }))
		};
	});
};
