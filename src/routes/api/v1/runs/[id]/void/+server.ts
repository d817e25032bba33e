import { operation } from '$lib/server/api';
import { Reason, RunView, voidRun } from '$lib/server/runs';

export const POST = operation({
	id: 'voidRun',
	summary: 'Set a run aside for good, with the reason',
	action: 'run.review',
	body: Reason,
	answer: RunView,
	run: ({ deps, who, params, body, ifMatch }) => voidRun(deps, who, params.id!, body.reason, ifMatch)
});
