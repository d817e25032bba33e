import { operation } from '$lib/server/api';
import { fuelBatchHistory } from '$lib/server/fuels';
import { HistoryView } from '$lib/server/history';

export const GET = operation({
	id: 'getFuelBatchHistory',
	summary: 'Who changed what on this fuel batch',
	action: 'lab.read',
	answer: HistoryView,
	run: async ({ deps, who, params }) => ({ items: await fuelBatchHistory(deps, who, params.id!) })
});
