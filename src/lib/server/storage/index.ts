import {
	CreateBucketCommand,
	GetObjectCommand,
	HeadBucketCommand,
	HeadObjectCommand,
	NoSuchKey,
	NotFound,
	S3Client
} from '@aws-sdk/client-s3';
import { Upload } from '@aws-sdk/lib-storage';
import type { Readable } from 'node:stream';
import type { Config } from '../config';

/** Objects by key. The application alone hands objects out: the store itself checks nobody. */
export interface ObjectStore {
	put(key: string, body: Uint8Array | Readable): Promise<void>;
	get(key: string): Promise<Buffer>;
	open(key: string): Promise<Readable>;
	/** `length` bytes from `from`; fewer at the object's end. */
	readRange(key: string, from: number, length: number): Promise<Buffer>;
	/** Size in bytes, or null where there is no such object. */
	size(key: string): Promise<number | null>;
	/** Fails when the store cannot be reached. */
	check(): Promise<void>;
	close(): void;
}

class ObjectMissing extends Error {
	constructor(key: string, cause?: unknown) {
		super(`The object store has no object ${key}.`, { cause });
	}
}

export function openObjectStore(config: Config['storage']): ObjectStore {
	const client = new S3Client({
		endpoint: config.endpoint,
		region: config.region,
		credentials: { accessKeyId: config.accessKeyId, secretAccessKey: config.secretAccessKey },
		forcePathStyle: true,
		// Several S3-compatible stores do not know the newer checksums: a streamed put would be corrupted in silence.
		requestChecksumCalculation: 'WHEN_REQUIRED',
		responseChecksumValidation: 'WHEN_REQUIRED'
	});
	const Bucket = config.bucket;
	let bucketMade = false;

	async function ensureBucket(): Promise<void> {
		if (bucketMade) return;
		try {
			await client.send(new HeadBucketCommand({ Bucket }));
		} catch (error) {
			if (!(error instanceof NotFound)) throw error;
			await client.send(new CreateBucketCommand({ Bucket }));
		}
		bucketMade = true;
	}

	async function fetchBody(key: string, Range?: string) {
		try {
			const { Body } = await client.send(new GetObjectCommand({ Bucket, Key: key, Range }));
			if (!Body) throw new ObjectMissing(key);
			return Body;
		} catch (error) {
			if (error instanceof NoSuchKey) throw new ObjectMissing(key, error);
			throw error;
		}
	}

	return {
		async put(key, body) {
			await ensureBucket();
			await new Upload({ client, params: { Bucket, Key: key, Body: body }, queueSize: 2 }).done();
		},
		async get(key) {
			return Buffer.from(await (await fetchBody(key)).transformToByteArray());
		},
		async open(key) {
			return (await fetchBody(key)) as Readable;
		},
		async readRange(key, from, length) {
			if (length <= 0) return Buffer.alloc(0);
			const body = await fetchBody(key, `bytes=${from}-${from + length - 1}`);
			return Buffer.from(await body.transformToByteArray());
		},
		async size(key) {
			try {
				return (await client.send(new HeadObjectCommand({ Bucket, Key: key }))).ContentLength ?? 0;
			} catch (error) {
				if (error instanceof NotFound) return null;
				throw error;
			}
		},
		async check() {
			await client.send(new HeadBucketCommand({ Bucket })).catch((error: unknown) => {
				// A bucket that is not there yet is made at the first put; any other answer means the store is away.
				if (!(error instanceof NotFound)) throw error;
			});
		},
		close: () => client.destroy()
	};
}
