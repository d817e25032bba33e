import { operation } from '$lib/server/api';
import { EarlierQuery, EarlierView, readEarlier } from '$lib/server/traces';

export const GET = operation({
	id: 'listEarlierCurves',
	summary: 'Earlier runs of the same build that have a curve, and the curves of those chosen',
	action: 'run.read',
	query: EarlierQuery,
	answer: EarlierView,
	run: ({ deps, who, params, query }) => readEarlier(deps, who, params.id!, query)
});
