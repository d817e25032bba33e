import { z } from 'zod';
import { fields } from '../api';

export const AttachmentView = z.object({
	id: z.string(),
	filename: z.string(),
	contentType: z.string(),
	sizeBytes: z.number(),
	sha256: z.string(),
	addedBy: z.string(),
	createdAt: fields.instantOut,
	/** Set once it was put aside: it stays in the record, and clients see it no more. */
	removed: z.object({ by: z.string(), at: fields.instantOut, reason: z.string() }).nullable()
});
export type Attachment = z.input<typeof AttachmentView>;

export const AttachmentList = z.object({ items: z.array(AttachmentView) });
export const UploadQuery = z.object({ filename: z.string().max(1000).optional() });
export const RemoveAttachment = z.object({ reason: fields.reason.min(1, 'say why it is removed') });
