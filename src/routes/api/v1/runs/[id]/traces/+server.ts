import { z } from 'zod';
import { operation } from '$lib/server/api';
import { uploadOf } from '$lib/server/files';
import { receiveTrace } from '$lib/server/traces';

export const POST = operation({
	id: 'uploadTrace',
	summary: 'Upload a trace: the file’s bytes as the body',
	action: 'trace.upload',
	query: z.object({ filename: z.string().max(1000).optional() }),
	bytes: true,
	answer: z.object({ id: z.string(), state: z.literal('received') }),
	status: 202,
	run: ({ deps, who, params, ...call }) => receiveTrace(deps, who, params.id!, uploadOf(call))
});
