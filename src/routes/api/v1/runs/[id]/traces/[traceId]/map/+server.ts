import { z } from 'zod';
import { operation } from '$lib/server/api';
import { mapTrace, TraceMap } from '$lib/server/traces';

export const POST = operation({
	id: 'mapTrace',
	summary: 'Say what the columns are; the figures are made again',
	action: 'trace.map',
	body: TraceMap,
	answer: z.object({ id: z.string(), state: z.literal('received') }),
	status: 202,
	run: ({ deps, who, params, body }) => mapTrace(deps, who, params.id!, params.traceId!, body)
});
