import { z } from 'zod';
import { operation } from '$lib/server/api';
import { downloadOriginal } from '$lib/server/traces';

export const GET = operation({
	id: 'downloadOriginal',
	summary: 'The file as it was uploaded',
	action: 'run.read',
	answer: z.unknown(),
	run: ({ deps, who, params }) => downloadOriginal(deps, who, params.id!, params.traceId!)
});
