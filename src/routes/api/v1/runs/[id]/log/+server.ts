import { z } from 'zod';
import { operation } from '$lib/server/api';
import { addLogLine, listLogLines, LogLineView, NewLogLine } from '$lib/server/runs';

export const GET = operation({
	id: 'listLogLines',
	summary: 'The run’s log, corrected lines included',
	action: 'run.read',
	answer: z.object({ items: z.array(LogLineView) }),
	run: async ({ deps, who, params }) => ({ items: await listLogLines(deps, who, params.id!) })
});

export const POST = operation({
	id: 'addLogLine',
	summary: 'Append a log line, or correct one by superseding it',
	action: 'run.log',
	body: NewLogLine,
	answer: LogLineView,
	status: 201,
	run: ({ deps, who, params, body }) => addLogLine(deps, who, params.id!, body)
});
