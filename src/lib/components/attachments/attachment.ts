/** A file attached to a run, a build or a fuel batch, as the API gives it. */
export interface AttachedFile {
	id: string;
	filename: string;
	contentType: string;
	sizeBytes: number;
	addedBy: string;
	createdAt: Date | string;
	removed: { by: string; at: Date | string; reason: string } | null;
}

export const fileAt = (id: string) => `/api/v1/attachments/${encodeURIComponent(id)}`;
