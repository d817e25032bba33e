import { operation } from '$lib/server/api';
import { answerCheck, ChecklistView, getChecklist, NewCheck } from '$lib/server/logbook';

export const GET = operation({
	id: 'getChecklist',
	summary: 'The pre-run checklist: what holds of each item, and what was answered before',
	action: 'run.read',
	answer: ChecklistView,
	run: ({ deps, who, params }) => getChecklist(deps, who, params.id!)
});

export const POST = operation({
	id: 'answerCheck',
	summary: 'Answer one item of the checklist; earlier answers stay',
	action: 'run.log',
	body: NewCheck,
	answer: ChecklistView,
	status: 201,
	run: ({ deps, who, params, body }) => answerCheck(deps, who, params.id!, body)
});
