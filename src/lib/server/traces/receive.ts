import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { Principal } from '../access';
import { reading, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { enqueue, PRIORITY } from '../jobs';
import { conflict, Problem } from '../problem';
import { resolve } from '../refs';

export interface Received {
	id: string;
	state: 'received';
}

interface Upload {
	filename: string | null;
	body: ReadableStream<Uint8Array> | Readable | null;
	/** As declared by the sender, to refuse early; what counts is what arrives. */
	declaredBytes: number | null;
	/** Demo data waits behind every user's work. */
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
	upload: Upload
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
	const limit = deps.config.maxTraceBytes;
	if (upload.declaredBytes !== null && upload.declaredBytes > limit) throw tooLarge(limit);
	const folder = await mkdtemp(path.join(tmpdir(), 'trunnion-upload-'));
	try {
		const spooled = await spool(upload.body, path.join(folder, 'original'), limit);
		const key = `clients/${clientId}/originals/${spooled.sha256.toString('hex')}`;
		// The same bytes may come again under another run: only the object is shared.
		if ((await deps.store.size(key)) !== spooled.sizeBytes)
			await deps.store.put(key, createReadStream(spooled.file));
		return await record(deps, who, { runId, clientId, key, spooled, upload });
	} finally {
		await rm(folder, { recursive: true, force: true });
	}
}

interface Spooled {
	file: string;
	sha256: Buffer;
	sizeBytes: number;
}

async function spool(body: Upload['body'], file: string, limit: number): Promise<Spooled> {
	const hash = createHash('sha256');
	let sizeBytes = 0;
	const source =
		body === null ? Readable.from([]) : body instanceof Readable ? body : Readable.fromWeb(body as never);
	await pipeline(
		source,
		async function* (chunks: AsyncIterable<Buffer>) {
			for await (const chunk of chunks) {
				sizeBytes += chunk.byteLength;
				if (sizeBytes > limit) throw tooLarge(limit);
				hash.update(chunk);
				yield chunk;
			}
		},
		createWriteStream(file, { mode: 0o600 })
	);
	return { file, sha256: hash.digest(), sizeBytes };
}

const tooLarge = (limit: number) =>
	new Problem(
		413,
		'Too large',
		`A trace may have ${Math.floor(limit / 1024 / 1024)} MiB at most. Split the log, or export fewer channels.`
	);

async function record(
	deps: Deps,
	who: Principal,
	input: { runId: string; clientId: string; key: string; spooled: Spooled; upload: Upload }
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
		const filename = safeName(upload.filename);
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
		await enqueue(trx, 'trace.process', { clientId, traceId: id }, id, {
			priority: upload.background ? PRIORITY.background : PRIORITY.user
		});
		return { id, state: 'received' };
	});
}

/** What is left of a file's name: its last part, without control characters or marks that turn text around. */
function safeName(given: string | null): string {
	const last = (given ?? '').split(/[\\/]/).pop() ?? '';
	const clean = last
		.toWellFormed()
		.replace(/[\p{Cc}\p{Cf}]/gu, '')
		.trim();
	return [...clean].slice(0, 120).join('') || 'trace';
}
