import { operation } from '$lib/server/api';
import { AttachmentView, removeAttachment, RemoveAttachment } from '$lib/server/attachments';

export const POST = operation({
	id: 'removeFuelBatchAttachment',
	summary: 'Put an attachment of a fuel batch aside, with the reason; it stays in the record',
	action: 'fuel.write',
	body: RemoveAttachment,
	answer: AttachmentView,
	run: ({ deps, who, params, body }) =>
		removeAttachment(deps, who, { kind: 'fuel_batch', ref: params.id! }, params.attachmentId!, body)
});
