import { operation } from '$lib/server/api';
import { engineBehind, recomputeEngine } from '$lib/server/engines';
import { BehindView } from '$lib/server/recompute';

export const GET = operation({
	id: 'getEngineBehind',
	summary: 'Runs whose figures come from earlier values of this engine',
	action: 'engine.read',
	answer: BehindView,
	run: ({ deps, who, params }) => engineBehind(deps, who, params.id!)
});

export const POST = operation({
	id: 'recomputeEngine',
	summary: 'Compute their figures again; accepted runs keep theirs',
	action: 'engine.write',
	answer: BehindView,
	status: 202,
	run: ({ deps, who, params }) => recomputeEngine(deps, who, params.id!)
});
