import { operation } from '$lib/server/api';
import { getRun, RunView } from '$lib/server/runs';

export const GET = operation({
	id: 'getRun',
	summary: 'One run with its traces, figures, points and flags',
	action: 'run.read',
	answer: RunView,
	run: ({ deps, who, params }) => getRun(deps, who, params.id!)
});
