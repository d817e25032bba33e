import { operation } from '$lib/server/api';
import { AttachmentView, removeAttachment, RemoveAttachment } from '$lib/server/attachments';

export const POST = operation({
	id: 'removeBuildAttachment',
	summary: 'Put an attachment of a build aside, with the reason; it stays in the record',
	action: 'build.write',
	body: RemoveAttachment,
	answer: AttachmentView,
	run: ({ deps, who, params, body }) =>
		removeAttachment(deps, who, { kind: 'build', ref: params.id! }, params.attachmentId!, body)
});
