/** The parts of s3rver that the object store uses; the package carries no types. */
declare module 's3rver' {
	import type { IncomingMessage, ServerResponse } from 'node:http';
	import type { Readable } from 'node:stream';

	interface StoredObject {
		bucket: string;
		key: string;
		content: Readable | Buffer | null;
		metadata: Record<string, string>;
		range?: { start: number; end: number };
	}
	interface Store {
		getBucket(bucket: string): Promise<object | null>;
		putBucket(bucket: string): Promise<object | null>;
		getResourcePath(bucket: string, key: string | undefined, resource: string): string;
		getMetadata(bucket: string, key: string): Promise<Record<string, string>>;
		putMetadata(bucket: string, key: string, metadata: Record<string, string>, md5: string): Promise<void>;
		getObject(
			bucket: string,
			key: string,
			options?: { start?: number; end?: number }
		): Promise<StoredObject | null>;
		putObject(object: StoredObject): Promise<{ size: number; md5: string }>;
		putPart(
			bucket: string,
			uploadId: string,
			partNumber: string,
			content: Readable
		): Promise<{ size: number; md5: string }>;
		putObjectMultipart(
			bucket: string,
			uploadId: string,
			parts: { number: number; etag: string }[]
		): Promise<{ size: number; md5: string }>;
	}
	export default class S3rver {
		constructor(options: { directory: string; silent: boolean; vhostBuckets: boolean });
		store: Store;
		callback(): (request: IncomingMessage, response: ServerResponse) => void;
		on(event: 'error', listener: (error: Error) => void): void;
	}
}

declare module 's3rver/lib/models/account.js' {
	const accounts: { DUMMY_ACCOUNT: { createKeyPair(id: string, secret: string): void } };
	export default accounts;
}

declare module 's3rver/lib/models/error.js' {
	export default class S3Error extends Error {
		constructor(code: string, message: string, detail?: Record<string, string>);
		status: number;
		toXML(): string;
	}
}
