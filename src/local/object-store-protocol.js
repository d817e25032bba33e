import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, readFile, readdir, rename, rm, stat, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import S3Error from 's3rver/lib/models/error.js';

/**
 * What the S3 server lacks and the application relies on: access only by key, ListParts, AbortMultipartUpload, suffix
 * ranges, and objects that appear whole or not at all.
 * @typedef {import('s3rver').default['store']} Store
 * @typedef {import('node:http').IncomingMessage} IncomingMessage
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */

/**
 * Handles a request, or makes it fit for the server behind.
 * @param {Store} store
 * @param {string} accessKeyId random, and so as good as a password on a loopback port; signatures are not computed
 * @param {IncomingMessage} request
 * @param {ServerResponse} response
 * @returns {Promise<boolean>} whether it was answered here
 */
export async function beforeStore(store, accessKeyId, request, response) {
	const url = new URL(request.url ?? '/', 'http://127.0.0.1');
	const credential =
		/Credential=([^/,]+)\//.exec(request.headers.authorization ?? '')?.[1] ??
		url.searchParams.get('X-Amz-Credential')?.split('/')[0];
	if (credential !== accessKeyId) throw new S3Error('AccessDenied', 'Access Denied');
	const payload = String(request.headers['x-amz-content-sha256'] ?? '');
	if (payload.startsWith('STREAMING-') || /aws-chunked/.test(request.headers['content-encoding'] ?? ''))
		throw new S3Error(
			'NotImplemented',
			'Chunked signatures are not understood; they would be stored as data.'
		);

	const [bucket = '', ...rest] = url.pathname.slice(1).split('/').map(decodeURIComponent);
	const key = rest.join('/');
	// A key is a path below the folder here: it must not lead out of it.
	if ([bucket, ...rest].some((part) => part === '.' || part === '..'))
		throw new S3Error('InvalidURI', 'A key may not hold the path segments "." and "..".');
	const uploadId = url.searchParams.get('uploadId');
	if (uploadId !== null) return multipart(store, { bucket, key, uploadId }, url, request, response);
	await absoluteRange(store, bucket, key, request);
	return false;
}

/**
 * @param {Store} store
 * @param {{ bucket: string, key: string, uploadId: string }} upload
 * @param {URL} url
 * @param {IncomingMessage} request
 * @param {ServerResponse} response
 */
async function multipart(store, upload, url, request, response) {
	const folder = path.join(store.getResourcePath(upload.bucket, undefined, 'uploads'), upload.uploadId);
	const known = /^[0-9a-f]{32}$/.test(upload.uploadId) && (await exists(path.join(folder, 'metadata')));
	if (!known || (await readFile(path.join(folder, 'key'), 'utf8')) !== upload.key)
		throw new S3Error('NoSuchUpload', 'The specified multipart upload does not exist.', {
			UploadId: upload.uploadId
		});
	if (request.method === 'PUT') {
		const part = url.searchParams.get('partNumber') ?? '';
		if (!/^[1-9]\d{0,4}$/.test(part) || Number(part) > 10_000)
			throw new S3Error('InvalidArgument', 'Part number must be an integer between 1 and 10000, inclusive');
		return false;
	}
	if (request.method === 'DELETE') {
		await rm(folder, { recursive: true });
		response.writeHead(204).end();
		return true;
	}
	if (request.method === 'GET') {
		response.writeHead(200, { 'content-type': 'application/xml' });
		response.end(await listParts(folder, upload, url.searchParams));
		return true;
	}
	return false;
}

/**
 * @param {string} folder
 * @param {{ bucket: string, key: string, uploadId: string }} upload
 * @param {URLSearchParams} query
 */
async function listParts(folder, upload, query) {
	const after = Number(query.get('part-number-marker') ?? 0);
	const most = Math.min(Number(query.get('max-parts') ?? 1000), 1000);
	const names = await readdir(folder);
	// A part is there once its checksum is: that is written last.
	const numbers = names.filter((name) => /^\d+$/.test(name) && names.includes(`${name}.md5`)).map(Number);
	const wanted = numbers.filter((number) => number > after).sort((a, b) => a - b);
	const page = wanted.slice(0, most);
	const parts = await Promise.all(
		page.map(async (number) => {
			const { size, mtime } = await stat(path.join(folder, String(number)));
			const md5 = await readFile(path.join(folder, `${number}.md5`), 'utf8');
			return `<Part><PartNumber>${number}</PartNumber><LastModified>${mtime.toISOString()}</LastModified><ETag>&quot;${md5}&quot;</ETag><Size>${size}</Size></Part>`;
		})
	);
	return (
		'<?xml version="1.0" encoding="UTF-8"?>\n<ListPartsResult xmlns="http://s3.amazonaws.com/doc/2006-03-01/">' +
		`<Bucket>${xml(upload.bucket)}</Bucket><Key>${xml(upload.key)}</Key><UploadId>${upload.uploadId}</UploadId>` +
		`<PartNumberMarker>${after}</PartNumberMarker><NextPartNumberMarker>${page.at(-1) ?? 0}</NextPartNumberMarker>` +
		`<MaxParts>${most}</MaxParts><IsTruncated>${wanted.length > page.length}</IsTruncated>${parts.join('')}</ListPartsResult>`
	);
}

/** @param {string} text */
const xml = (text) =>
	text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');

/**
 * The server behind takes `bytes=-500` for the first 500 bytes: give it the last ones by their numbers.
 * @param {Store} store
 * @param {string} bucket
 * @param {string} key
 * @param {IncomingMessage} request
 */
async function absoluteRange(store, bucket, key, request) {
	const suffix = /^bytes=-(\d+)$/.exec(request.headers.range ?? '');
	if (!suffix || !key) return;
	const object = store.getResourcePath(bucket, key, 'object');
	if (!(await exists(object))) return;
	const { size } = await stat(object);
	const wanted = Number(suffix[1]);
	if (wanted === 0 || size === 0) throw new S3Error('InvalidRange', 'The requested range is not satisfiable');
	request.headers.range = `bytes=${Math.max(0, size - wanted)}-${size - 1}`;
}

/** @param {string} file */
const exists = (file) =>
	stat(file).then(
		() => true,
		() => false
	);

/**
 * Objects and parts are written aside and moved into place when their last byte is there and their digest is the one
 * that was announced. The server behind answers earlier, and leaves half an object where an upload breaks off.
 * @param {Store} store
 * @param {string} folder
 * @param {boolean} sync whether an acknowledged object outlives a power cut
 */
export function storeSafely(store, folder, sync) {
	const incoming = `${folder}-incoming`;

	/** @param {Readable | Buffer | null} content */
	async function receive(content) {
		await mkdir(incoming, { recursive: true });
		const file = path.join(incoming, randomUUID());
		const [md5, sha256] = [createHash('md5'), createHash('sha256')];
		let size = 0;
		const measure = new Transform({
			transform(chunk, _encoding, next) {
				md5.update(chunk);
				sha256.update(chunk);
				size += chunk.length;
				next(null, chunk);
			}
		});
		try {
			const source = content instanceof Readable ? content : Readable.from([content ?? Buffer.alloc(0)]);
			await pipeline(source, measure, createWriteStream(file, { flags: 'wx', mode: 0o600, flush: sync }));
			checkDigest(content, sha256.digest('hex'));
		} catch (error) {
			await rm(file, { force: true });
			throw error;
		}
		return { file, size, md5: md5.digest('hex') };
	}

	store.putObject = async (object) => {
		const { file, size, md5 } = await receive(object.content);
		const target = store.getResourcePath(object.bucket, object.key, 'object');
		await mkdir(path.dirname(target), { recursive: true });
		await store.putMetadata(object.bucket, object.key, object.metadata, md5);
		await rename(file, target);
		return { size, md5 };
	};
	store.putPart = async (bucket, uploadId, partNumber, content) => {
		const { file, size, md5 } = await receive(content);
		const target = path.join(store.getResourcePath(bucket, undefined, 'uploads'), uploadId, partNumber);
		await rename(file, target);
		await writeFile(`${target}.md5`, md5);
		return { size, md5 };
	};
	const assemble = store.putObjectMultipart.bind(store);
	store.putObjectMultipart = async (bucket, uploadId, parts) => {
		const parked = path.join(store.getResourcePath(bucket, undefined, 'uploads'), uploadId);
		for (const { number, etag } of parts) {
			const md5 = await readFile(path.join(parked, `${number}.md5`), 'utf8').catch(() => null);
			if (md5 !== etag)
				throw new S3Error('InvalidPart', `Part ${number} was not found, or is another by now.`);
		}
		return assemble(bucket, uploadId, parts);
	};
	const getObject = store.getObject.bind(store);
	store.getObject = async (bucket, key, options) => {
		const object = await getObject(bucket, key, options);
		// `bytes=0-0` is taken for an open end behind.
		if (object?.range && options?.start === 0 && options.end === 0 && object.content instanceof Readable) {
			object.content.destroy();
			object.range.end = 0;
			object.content = createReadStream(store.getResourcePath(bucket, key, 'object'), { start: 0, end: 0 });
		}
		return object;
	};
}

/**
 * @param {Readable | Buffer | null} content
 * @param {string} sha256
 */
function checkDigest(content, sha256) {
	if (!content || !('headers' in content)) return;
	const headers = /** @type {IncomingMessage} */ (content).headers;
	const announced = String(headers['x-amz-content-sha256'] ?? '');
	if (/^[0-9a-f]{64}$/.test(announced) && announced !== sha256)
		throw new S3Error('BadDigest', 'The content does not match the digest that was announced.');
}
