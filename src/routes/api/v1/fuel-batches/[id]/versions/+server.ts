import { operation } from '$lib/server/api';
import { FuelBatchVersions, listFuelBatchVersions } from '$lib/server/fuels';

export const GET = operation({
	id: 'listFuelBatchVersions',
	summary: 'What a batch was recorded as, newest first',
	action: 'lab.read',
	answer: FuelBatchVersions,
	run: async ({ deps, who, params }) => ({ items: await listFuelBatchVersions(deps, who, params.id!) })
});
