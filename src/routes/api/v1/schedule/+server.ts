import { operation } from '$lib/server/api';
import { readSchedule, ScheduleQuery, ScheduleView } from '$lib/server/schedule';

export const GET = operation({
	id: 'readSchedule',
	summary: 'Every cell’s time as you may see it',
	action: 'schedule.read',
	query: ScheduleQuery,
	answer: ScheduleView,
	run: ({ deps, who, query }) => readSchedule(deps, who, query)
});
