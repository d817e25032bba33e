import { z } from 'zod';
import { operation } from '$lib/server/api';
import { readCurve } from '$lib/server/traces';

export const GET = operation({
	id: 'getCurve',
	summary: 'The reduced curve over speed',
	action: 'run.read',
	answer: z.record(z.string(), z.array(z.number().nullable())),
	run: ({ deps, who, params }) => readCurve(deps, who, params.id!)
});
