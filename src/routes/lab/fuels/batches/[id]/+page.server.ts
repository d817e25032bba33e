import { listAttachments } from '$lib/server/attachments';
import {
	checkFuelBatch,
	fuelBatchBehind,
	fuelBatchHistory,
	getFuel,
	getFuelBatch,
	listFuelBatchVersions,
	recomputeFuelBatch
} from '$lib/server/fuels';
import { listRuns } from '$lib/server/runs';
import { pageData, personMay } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url, depends }) => {
	const who = personMay(locals, 'lab.read');
	const { deps } = locals;
	depends('app:batch');
	return pageData({ locals }, async () => {
		const batch = await getFuelBatch(deps, who, params.id);
		const cursor = url.searchParams.get('cursor') ?? undefined;
		const [fuel, check, versions, behind, history, attachments, runs] = await Promise.all([
			getFuel(deps, who, batch.fuel),
			checkFuelBatch(deps, who, batch.id),
			listFuelBatchVersions(deps, who, batch.id),
			fuelBatchBehind(deps, who, batch.id),
			fuelBatchHistory(deps, who, batch.id),
			listAttachments(deps, who, { kind: 'fuel_batch', ref: batch.id }),
			listRuns(deps, who, { fuelBatch: batch.id, limit: 25, cursor })
		]);
		return { batch, fuel, check, versions, behind, history, attachments, runs };
	});
};

export const actions: Actions = {
	recompute: async ({ locals, params }) => {
		const who = personMay(locals, 'fuel.write');
		const { runs } = await pageData({ locals }, () => recomputeFuelBatch(locals.deps, who, params.id));
		return { done: `${runs === 1 ? 'One run is' : `${runs} runs are`} being computed again.` };
	}
};
