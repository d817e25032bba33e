import { z } from 'zod';
import { operation } from '$lib/server/api';
import { scheduleEvents } from '$lib/server/events';

export const GET = operation({
	id: 'scheduleEvents',
	summary:
		'Server-sent events: `changed` each time the schedule, as you may see it, is another; then read it again',
	action: 'schedule.read',
	answer: z.string(),
	mediaType: 'text/event-stream',
	run: ({ deps, who }) => scheduleEvents(deps, who)
});
