import { z } from 'zod';
import { operation } from '$lib/server/api';
import { downloadAttachment } from '$lib/server/attachments';

export const GET = operation({
	id: 'downloadAttachment',
	summary: 'An attachment’s file as it came in',
	action: 'attachment.read',
	answer: z.unknown(),
	run: ({ deps, who, params }) => downloadAttachment(deps, who, params.id!)
});
