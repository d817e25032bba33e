import { operation } from '$lib/server/api';
import { closeRun, RunView } from '$lib/server/runs';

export const POST = operation({
	id: 'closeRun',
	summary: 'Close an open record',
	action: 'run.open',
	answer: RunView,
	run: ({ deps, who, params, ifMatch }) => closeRun(deps, who, params.id!, ifMatch)
});
