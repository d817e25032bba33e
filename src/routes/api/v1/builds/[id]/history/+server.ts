import { operation } from '$lib/server/api';
import { buildHistory } from '$lib/server/builds';
import { HistoryView } from '$lib/server/history';

export const GET = operation({
	id: 'getBuildHistory',
	summary: 'Who changed what on this build',
	action: 'engine.read',
	answer: HistoryView,
	run: async ({ deps, who, params }) => ({ items: await buildHistory(deps, who, params.id!) })
});
