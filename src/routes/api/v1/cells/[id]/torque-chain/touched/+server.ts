import { operation } from '$lib/server/api';
import { runsTouchedBy, TouchedQuery, TouchedView } from '$lib/server/cells';

export const GET = operation({
	id: 'runsTouchedByTorqueChain',
	summary: 'Runs whose figures a torque chain valid from this time would change',
	action: 'cell.write',
	query: TouchedQuery,
	answer: TouchedView,
	run: ({ deps, who, params, query }) => runsTouchedBy(deps, who, params.id!, query.validFrom)
});
