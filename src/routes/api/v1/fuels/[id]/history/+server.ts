import { operation } from '$lib/server/api';
import { fuelHistory } from '$lib/server/fuels';
import { HistoryView } from '$lib/server/history';

export const GET = operation({
	id: 'getFuelHistory',
	summary: 'Who changed what on this fuel',
	action: 'lab.read',
	answer: HistoryView,
	run: async ({ deps, who, params }) => ({ items: await fuelHistory(deps, who, params.id!) })
});
