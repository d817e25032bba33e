import { operation } from '$lib/server/api';
import { NewFlag, RunView, flagRun } from '$lib/server/runs';

export const POST = operation({
	id: 'flagRun',
	summary: 'Raise a flag by hand',
	action: 'run.flag',
	body: NewFlag,
	answer: RunView,
	run: ({ deps, who, params, body, ifMatch }) => flagRun(deps, who, params.id!, body, ifMatch)
});
