import { operation } from '$lib/server/api';
import { readTrend, TrendQuery, TrendView } from '$lib/server/trends';

export const GET = operation({
	id: 'readTrend',
	summary: 'A metric over groups of runs',
	action: 'trend.read',
	query: TrendQuery,
	answer: TrendView,
	run: ({ deps, who, query }) => readTrend(deps, who, query)
});
