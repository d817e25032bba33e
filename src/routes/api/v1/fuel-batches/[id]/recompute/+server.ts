import { operation } from '$lib/server/api';
import { fuelBatchBehind, recomputeFuelBatch } from '$lib/server/fuels';
import { BehindView } from '$lib/server/recompute';

export const GET = operation({
	id: 'getFuelBatchBehind',
	summary: 'Runs whose figures come from earlier values of this fuel batch',
	action: 'lab.read',
	answer: BehindView,
	run: ({ deps, who, params }) => fuelBatchBehind(deps, who, params.id!)
});

export const POST = operation({
	id: 'recomputeFuelBatch',
	summary: 'Compute their figures again; accepted runs keep theirs',
	action: 'fuel.write',
	answer: BehindView,
	status: 202,
	run: ({ deps, who, params }) => recomputeFuelBatch(deps, who, params.id!)
});
