import { operation } from '$lib/server/api';
import { OptionalReason, RunView, acceptRun } from '$lib/server/runs';

export const POST = operation({
	id: 'acceptRun',
	summary: 'Accept a run that another logged',
	action: 'run.review',
	body: OptionalReason,
	answer: RunView,
	run: ({ deps, who, params, body, ifMatch }) => acceptRun(deps, who, params.id!, body.reason, ifMatch)
});
