import { operation } from '$lib/server/api';
import { changeRun, getRun, RunChange, RunView } from '$lib/server/runs';

export const GET = operation({
	id: 'getRun',
	summary: 'One run with its traces, figures, points and flags',
	action: 'run.read',
	answer: RunView,
	run: ({ deps, who, params }) => getRun(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeRun',
	summary: 'Change what is declared of a run that is not accepted or void',
	action: 'run.open',
	body: RunChange,
	answer: RunView,
	run: ({ deps, who, params, body, ifMatch }) => changeRun(deps, who, params.id!, body, ifMatch)
});
