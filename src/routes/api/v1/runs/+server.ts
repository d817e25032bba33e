import { z } from 'zod';
import { operation, pageOf, PageQuery } from '$lib/server/api';
import { wantsCsv } from '$lib/server/csv';
import { listRuns, NewRun, openRun, RunListItem, RunQuery, runsCsv, RunView } from '$lib/server/runs';

export const GET = operation({
	id: 'listRuns',
	summary: 'Runs you may see, newest first',
	action: 'run.read',
	// A CSV holds all runs of the list: `limit` and `cursor` are of the pages in JSON.
	query: PageQuery.extend(RunQuery.shape).extend({ format: z.enum(['json', 'csv']).optional() }),
	csv: true,
	answer: pageOf(RunListItem).extend({ notes: z.array(z.string()) }),
	run: ({ deps, who, query: { format, ...query }, request }) =>
		wantsCsv(request, format) ? runsCsv(deps, who, query) : listRuns(deps, who, query)
});

export const POST = operation({
	id: 'openRun',
	summary: 'Open a run’s record',
	action: 'run.open',
	body: NewRun,
	answer: RunView,
	status: 201,
	run: ({ deps, who, body }) => openRun(deps, who, body)
});
