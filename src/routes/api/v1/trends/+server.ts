import { z } from 'zod';
import { operation } from '$lib/server/api';
import { wantsCsv } from '$lib/server/csv';
import { readTrend, trendCsv, TrendQuery, TrendView } from '$lib/server/trends';

export const GET = operation({
	id: 'readTrend',
	summary: 'A metric over groups of runs',
	action: 'trend.read',
	query: TrendQuery.extend({
		format: z.enum(['json', 'csv']).optional(),
		/** Of a CSV: every run behind the trend, or its groups. */
		table: z.enum(['points', 'groups']).default('points')
	}),
	csv: true,
	answer: TrendView,
	run: ({ deps, who, query: { format, table, ...query }, request }) =>
		wantsCsv(request, format) ? trendCsv(deps, who, query, table) : readTrend(deps, who, query)
});
