import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { Deps } from '../deps';
import { Problem } from '../problem';

export interface Upload {
	filename: string | null;
	body: ReadableStream<Uint8Array> | Readable | null;
	/** As declared by the sender, to refuse early; what counts is what arrives. */
	declaredBytes: number | null;
}

/** What a request sends: the body's bytes, and the name in the address. */
export function uploadOf(call: {
	query: { filename?: string | undefined };
	request: Request;
	bytes: Upload['body'];
}): Upload {
	return {
		filename: call.query.filename ?? null,
		body: call.bytes,
		declaredBytes: Number(call.request.headers.get('content-length') ?? Number.NaN) || null
	};
}

/** A file that has come in whole: on disk, with the hash of its bytes. */
export interface Spooled {
	file: string;
	sha256: Buffer;
	sizeBytes: number;
}

interface Limit {
	bytes: number;
	/** What may have that many bytes at most: "A trace". */
	what: string;
	/** What the sender can do about it. */
	advice: string;
}

/**
 * Takes a body to disk while hashing it, hands it to `work`, and leaves nothing behind: a file of any size costs little
 * memory, and one that breaks off half-way is not seen by anybody.
 * @throws Problem 413 for one beyond the limit
 */
export async function withSpooled<T>(
	upload: Upload,
	limit: Limit,
	work: (spooled: Spooled) => Promise<T>
): Promise<T> {
	if (upload.declaredBytes !== null && upload.declaredBytes > limit.bytes) throw tooLarge(limit);
	const folder = await mkdtemp(path.join(tmpdir(), 'trunnion-upload-'));
	try {
		return await work(await spool(upload.body, path.join(folder, 'original'), limit));
	} finally {
		await rm(folder, { recursive: true, force: true });
	}
}

async function spool(body: Upload['body'], file: string, limit: Limit): Promise<Spooled> {
	const hash = createHash('sha256');
	let sizeBytes = 0;
	const source =
		body === null ? Readable.from([]) : body instanceof Readable ? body : Readable.fromWeb(body as never);
	await pipeline(
		source,
		async function* (chunks: AsyncIterable<Buffer>) {
			for await (const chunk of chunks) {
				sizeBytes += chunk.byteLength;
				if (sizeBytes > limit.bytes) throw tooLarge(limit);
				hash.update(chunk);
				yield chunk;
			}
		},
		createWriteStream(file, { mode: 0o600 })
	);
	return { file, sha256: hash.digest(), sizeBytes };
}

const tooLarge = ({ bytes, what, advice }: Limit) =>
	new Problem(413, 'Too large', `${what} may have ${Math.floor(bytes / 1024 / 1024)} MiB at most. ${advice}`);

/** Keeps a file under the hash of its bytes in this folder; the same bytes again share the object. Gives its key. */
export async function keepUnderHash(deps: Deps, folder: string, spooled: Spooled): Promise<string> {
	const key = `${folder}/${spooled.sha256.toString('hex')}`;
	if ((await deps.store.size(key)) !== spooled.sizeBytes)
		await deps.store.put(key, createReadStream(spooled.file));
	return key;
}

/** What is left of a file's name: its last part, without control characters or marks that turn text around. */
export function safeName(given: string | null, otherwise: string): string {
	const last = (given ?? '').split(/[\\/]/).pop() ?? '';
	const clean = last
		.toWellFormed()
		.replace(/[\p{Cc}\p{Cf}]/gu, '')
		.trim();
	return [...clean].slice(0, 120).join('') || otherwise;
}

interface Kept {
	filename: string;
	contentType: string;
	sizeBytes: number;
	objectKey: string;
}

/** A kept file as a download that no browser will run: a page of its own, if it ever became one, could do nothing. */
export async function asDownload(deps: Deps, kept: Kept): Promise<Response> {
	const ascii = kept.filename.replace(/[^\x20-\x7e]|["\\%]/g, '_');
	return new Response(Readable.toWeb(await deps.store.open(kept.objectKey)) as ReadableStream, {
		headers: {
			'content-type': kept.contentType,
			'content-length': String(kept.sizeBytes),
			'content-disposition': `attachment; filename="${ascii}"; filename*=UTF-8''${encodeURIComponent(kept.filename)}`,
			'content-security-policy': "default-src 'none'; sandbox",
			'x-content-type-options': 'nosniff',
			'cache-control': 'no-store'
		}
	});
}
