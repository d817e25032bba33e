import type { Principal } from '../access';
import { reading, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { keepUnderHash, safeName, withSpooled, type Spooled, type Upload } from '../files';
import { enqueue, PRIORITY } from '../jobs';
import { conflict } from '../problem';
import { resolve } from '../refs';

export interface Received {
	id: string;
	state: 'received';
}

interface TraceUpload extends Upload {
	/** Demo data waits behind every user's work, and nobody is mailed about its flags. */
	background?: boolean;
}

/**
 * Keeps an original untouched under the hash of its bytes, then records it and asks for its figures.
 * Check, store, record: nothing streams inside a transaction, and a broken upload leaves no record.
 */
export async function receiveTrace(
	deps: Deps,
	who: Principal,
	runRef: string,
	upload: TraceUpload
): Promise<Received> {
	const { id: runId, clientId } = await reading(deps.pools, who, async (trx) => {
		const found = await resolve(trx, 'run', runRef);
		const run = await trx
			.selectFrom('run')
			.select(['number', 'state'])
			.where('id', '=', found.id)
			.executeTakeFirstOrThrow();
		if (run.state === 'accepted' || run.state === 'voided')
			throw conflict(`Run ${run.number} is ${run.state}: its record takes no more traces. Open a new run.`);
		return { ...found, clientId: found.clientId! };
	});
	const limit = {
		bytes: deps.config.maxTraceBytes,
		what: 'A trace',
		advice: 'Split the log, or export fewer channels.'
	};
	return withSpooled(upload, limit, async (spooled) => {
		const key = await keepUnderHash(deps, `clients/${clientId}/originals`, spooled);
		return record(deps, who, { runId, clientId, key, spooled, upload });
	});
}

async function record(
	deps: Deps,
	who: Principal,
	input: { runId: string; clientId: string; key: string; spooled: Spooled; upload: TraceUpload }
): Promise<Received> {
	const { runId, clientId, key, spooled, upload } = input;
	return writing(deps.pools, who, async (trx) => {
		// Two uploads at once must not both become the primary trace.
		await trx.selectFrom('run').select('id').where('id', '=', runId).forUpdate().executeTakeFirstOrThrow();
		const primary = await trx
			.selectFrom('trace')
			.select('id')
			.where('runId', '=', runId)
			.where('isPrimary', '=', true)
			.executeTakeFirst();
		const filename = safeName(upload.filename, 'trace');
		const { id } = await trx
			.insertInto('trace')
			.values({
				clientId,
				runId,
				filename,
				isPrimary: !primary,
				sha256: spooled.sha256,
				sizeBytes: spooled.sizeBytes,
				objectKey: key,
				uploadedBy: who.personId
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'trace.receive',
			subject: 'run',
			subjectId: runId,
			clientId,
			after: { filename, sha256: spooled.sha256.toString('hex'), sizeBytes: spooled.sizeBytes }
		});
		await enqueue(
			trx,
			'trace.process',
			{ clientId, traceId: id, ...(upload.background ? { quiet: true } : {}) },
			id,
			{
				priority: upload.background ? PRIORITY.background : PRIORITY.user
			}
		);
		return { id, state: 'received' };
	});
}
