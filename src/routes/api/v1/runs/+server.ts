import { operation, pageOf, PageQuery } from '$lib/server/api';
import { listRuns, NewRun, openRun, RunListItem, RunQuery, RunView } from '$lib/server/runs';

export const GET = operation({
	id: 'listRuns',
	summary: 'Runs you may see, newest first',
	action: 'run.read',
	query: PageQuery.extend(RunQuery.shape),
	answer: pageOf(RunListItem),
	run: ({ deps, who, query }) => listRuns(deps, who, query)
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
