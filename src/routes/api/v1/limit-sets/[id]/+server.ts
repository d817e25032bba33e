import { operation } from '$lib/server/api';
import { getLimitSet, LimitSetView } from '$lib/server/limits';

export const GET = operation({
	id: 'getLimitSet',
	summary: 'One limit set with its newest version',
	action: 'lab.read',
	answer: LimitSetView,
	run: ({ deps, who, params }) => getLimitSet(deps, who, params.id!)
});
