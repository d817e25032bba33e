import { z } from 'zod';
import { operation } from '$lib/server/api';
import { placeTrace, TracePlace } from '$lib/server/traces';

export const PATCH = operation({
	id: 'placeTrace',
	summary: 'Choose the trace whose figures are the run’s, or set its clock against the run’s',
	action: 'trace.map',
	body: TracePlace,
	answer: z.object({ id: z.string(), primary: z.boolean(), timeOffsetS: z.number() }),
	run: ({ deps, who, params, body }) => placeTrace(deps, who, params.id!, params.traceId!, body)
});
