import { operation } from '$lib/server/api';
import {
	addAttachment,
	AttachmentList,
	AttachmentView,
	listAttachments,
	UploadQuery
} from '$lib/server/attachments';
import { uploadOf } from '$lib/server/files';

export const GET = operation({
	id: 'listRunAttachments',
	summary: 'What is attached to a run, in the order in which it came',
	action: 'run.read',
	answer: AttachmentList,
	run: async ({ deps, who, params }) => ({
		items: await listAttachments(deps, who, { kind: 'run', ref: params.id! })
	})
});

export const POST = operation({
	id: 'addRunAttachment',
	summary: 'Attach a photograph (JPEG, PNG, WebP) or a PDF: the file’s bytes as the body',
	action: 'run.attach',
	query: UploadQuery,
	bytes: true,
	answer: AttachmentView,
	status: 201,
	run: ({ deps, who, params, ...call }) =>
		addAttachment(deps, who, { kind: 'run', ref: params.id! }, uploadOf(call))
});
