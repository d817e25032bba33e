import { operation } from '$lib/server/api';
import { engineHistory } from '$lib/server/engines';
import { HistoryView } from '$lib/server/history';

export const GET = operation({
	id: 'getEngineHistory',
	summary: 'Who changed what on this engine',
	action: 'engine.read',
	answer: HistoryView,
	run: async ({ deps, who, params }) => ({ items: await engineHistory(deps, who, params.id!) })
});
