import { operation } from '$lib/server/api';
import { readToday, TodayView } from '$lib/server/today';

export const GET = operation({
	id: 'readToday',
	summary: 'The day in every cell, and what waits for someone, as you may see it',
	action: 'schedule.read',
	answer: TodayView,
	run: ({ deps, who }) => readToday(deps, who)
});
