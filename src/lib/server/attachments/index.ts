import { z } from 'zod';
import type { Principal } from '../access';
import { reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { asDownload, keepUnderHash, safeName, withSpooled, type Upload } from '../files';
import { conflict, notFound } from '../problem';
import { contentTypeOf, fittingName, withoutPosition } from './content';
import type { Attachment, RemoveAttachment } from './schemas';
import { columnOf, findSubject, refuseDecided, type SubjectRef } from './subject';

export { AttachmentList, AttachmentView, RemoveAttachment, UploadQuery } from './schemas';

const MOST_BYTES = 25 * 1024 * 1024;

/**
 * Keeps a photograph or a PDF with a run, a build or a fuel batch.
 * Check, store, record: nothing streams inside a transaction, and a broken upload leaves no record.
 */
export async function addAttachment(
	deps: Deps,
	who: Principal,
	to: SubjectRef,
	upload: Upload
): Promise<Attachment> {
	const subject = await reading(deps.pools, who, (trx) => findSubject(trx, to));
	const limit = {
		bytes: MOST_BYTES,
		what: 'An attachment',
		advice: 'Send a smaller picture, or split the document.'
	};
	return withSpooled(upload, limit, async (sent) => {
		const contentType = await contentTypeOf(sent.file);
		const spooled = await withoutPosition(sent, contentType);
		const filename = fittingName(safeName(upload.filename, 'attachment'), contentType);
		const owner = subject.clientId ? `clients/${subject.clientId}` : 'lab';
		const objectKey = await keepUnderHash(deps, `${owner}/attachments`, spooled);
		return writing(deps.pools, who, async (trx) => {
			const { id } = await trx
				.insertInto('attachment')
				.values({
					clientId: subject.clientId,
					[columnOf(subject.kind)]: subject.id,
					filename,
					contentType,
					sha256: spooled.sha256,
					sizeBytes: spooled.sizeBytes,
					objectKey,
					addedBy: who.personId
				})
				.returning('id')
				.executeTakeFirstOrThrow();
			await recordAudit(trx, who, {
				action: 'attachment.add',
				subject: subject.kind,
				subjectId: subject.id,
				clientId: subject.clientId,
				after: { filename, contentType, sha256: spooled.sha256.toString('hex'), attachmentId: id }
			});
			return toView(await selectAttachments(trx).where('a.id', '=', id).executeTakeFirstOrThrow());
		});
	});
}

function selectAttachments(trx: Trx) {
	return trx
		.selectFrom('attachment as a')
		.innerJoin('person as p', 'p.id', 'a.addedBy')
		.leftJoin('person as r', 'r.id', 'a.removedBy')
		.select([
			'a.id',
			'a.filename',
			'a.contentType',
			'a.sizeBytes',
			'a.sha256',
			'p.displayName as addedBy',
			'a.createdAt',
			'a.removedAt',
			'a.removedReason',
			'r.displayName as removedBy'
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectAttachments>['executeTakeFirstOrThrow']>>;
function toView({ removedAt, removedBy, removedReason, ...row }: Row): Attachment {
	return {
		...row,
		sha256: row.sha256.toString('hex'),
		removed: removedAt && { at: removedAt, by: removedBy ?? '', reason: removedReason ?? '' }
	};
}

/** In the order in which they came; those put aside too, for staff. */
export async function listAttachments(deps: Deps, who: Principal, of: SubjectRef): Promise<Attachment[]> {
	return reading(deps.pools, who, async (trx) => {
		const subject = await findSubject(trx, of);
		const rows = await selectAttachments(trx)
			.where(`a.${columnOf(subject.kind)}`, '=', subject.id)
			.orderBy('a.createdAt')
			.orderBy('a.id')
			.execute();
		return rows.map(toView);
	});
}

/** The file as it came in, but for a photograph's position. A picture may be shown by an `<img>` of our own pages; opened by itself it is a download. */
export async function downloadAttachment(deps: Deps, who: Principal, id: string): Promise<Response> {
	const kept = await reading(deps.pools, who, (trx) =>
		trx
			.selectFrom('attachment')
			.select(['filename', 'contentType', 'sizeBytes', 'objectKey'])
			.where('id', '=', idOf(id))
			.executeTakeFirst()
	);
	if (!kept) throw notFound('This attachment');
	return asDownload(deps, kept);
}

/** Puts an attachment aside, with the reason; row and bytes stay, and staff can still open it. */
export async function removeAttachment(
	deps: Deps,
	who: Principal,
	of: SubjectRef,
	id: string,
	{ reason }: z.output<typeof RemoveAttachment>
): Promise<Attachment> {
	return writing(deps.pools, who, async (trx) => {
		const subject = await findSubject(trx, of);
		const ofSubject = () =>
			selectAttachments(trx)
				.where('a.id', '=', idOf(id))
				.where(`a.${columnOf(subject.kind)}`, '=', subject.id);
		const attachment = await ofSubject().executeTakeFirst();
		if (!attachment) throw notFound('This attachment');
		await refuseDecided(trx, subject);
		// Of two who remove it at once, one does: the policy lets nobody change a row that is put aside.
		const { numUpdatedRows } = await trx
			.updateTable('attachment')
			.set({ removedAt: deps.now(), removedBy: who.personId, removedReason: reason })
			.where('id', '=', attachment.id)
			.where('removedAt', 'is', null)
			.executeTakeFirstOrThrow();
		if (!numUpdatedRows) throw conflict(`${attachment.filename} was removed already.`);
		await recordAudit(trx, who, {
			action: 'attachment.remove',
			subject: subject.kind,
			subjectId: subject.id,
			clientId: subject.clientId,
			after: { detail: `${attachment.filename}: ${reason}`, attachmentId: attachment.id }
		});
		return toView(await ofSubject().executeTakeFirstOrThrow());
	});
}

const idOf = (given: string) => z.uuid().safeParse(given).data ?? null;
