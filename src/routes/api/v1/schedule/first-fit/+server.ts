import { operation } from '$lib/server/api';
import { findSlots, FirstFitView, FirstFitWish } from '$lib/server/schedule';

export const POST = operation({
	id: 'findSlots',
	summary: 'The earliest slot in each cell that suits, and why the others do not',
	action: 'schedule.read',
	body: FirstFitWish,
	answer: FirstFitView,
	run: ({ deps, who, body }) => findSlots(deps, who, body)
});
