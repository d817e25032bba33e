import { operation } from '$lib/server/api';
import { FuelBatchView, getFuelBatch } from '$lib/server/fuels';

export const GET = operation({
	id: 'getFuelBatch',
	summary: 'One fuel batch',
	action: 'lab.read',
	answer: FuelBatchView,
	run: ({ deps, who, params }) => getFuelBatch(deps, who, params.id!)
});
