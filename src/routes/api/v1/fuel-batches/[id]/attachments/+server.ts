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
	id: 'listFuelBatchAttachments',
	summary: 'What is attached to a fuel batch, in the order in which it came',
	action: 'lab.read',
	answer: AttachmentList,
	run: async ({ deps, who, params }) => ({
		items: await listAttachments(deps, who, { kind: 'fuel_batch', ref: params.id! })
	})
});

export const POST = operation({
	id: 'addFuelBatchAttachment',
	summary: 'Attach a photograph (JPEG, PNG, WebP) or a PDF: the file’s bytes as the body',
	action: 'fuel.write',
	query: UploadQuery,
	bytes: true,
	answer: AttachmentView,
	status: 201,
	run: ({ deps, who, params, ...call }) =>
		addAttachment(deps, who, { kind: 'fuel_batch', ref: params.id! }, uploadOf(call))
});
