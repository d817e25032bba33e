import { operation } from '$lib/server/api';
import { AttachmentView, removeAttachment, RemoveAttachment } from '$lib/server/attachments';

export const POST = operation({
	id: 'removeRunAttachment',
	summary: 'Put an attachment of a run aside, with the reason; it stays in the record',
	action: 'run.attach',
	body: RemoveAttachment,
	answer: AttachmentView,
	run: ({ deps, who, params, body }) =>
		removeAttachment(deps, who, { kind: 'run', ref: params.id! }, params.attachmentId!, body)
});
