import { listCells } from '$lib/server/cells';
import { listEngines } from '$lib/server/engines';
import { listFuels } from '$lib/server/fuels';
import { listMetricCodes } from '$lib/server/trends';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

/** Only the choosers; the trend itself is fetched by the page from the API, so that a change of question reloads nothing else. */
export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'trend.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [metrics, engines, fuels, cells] = await Promise.all([
			listMetricCodes(deps, who),
			listEngines(deps, who),
			listFuels(deps, who),
			listCells(deps, who)
		]);
		return {
			metrics,
			engines: engines.map(({ id, client, code, name }) => ({ id, client, code, name })),
			fuels: fuels.map(({ code, name }) => ({ code, name })),
			cells: cells.map(({ code, name }) => ({ code, name }))
		};
	});
};
