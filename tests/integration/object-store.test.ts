import {
	AbortMultipartUploadCommand,
	CompleteMultipartUploadCommand,
	CreateBucketCommand,
	CreateMultipartUploadCommand,
	GetObjectCommand,
	HeadObjectCommand,
	ListObjectsV2Command,
	ListPartsCommand,
	PutObjectCommand,
	S3Client,
	UploadPartCommand
} from '@aws-sdk/client-s3';
import { request } from 'node:http';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { testServices } from '../setup/services';

/** The store of a machine that has none must do what a real one does, or tests against it show nothing. */
const Bucket = 'object-store-test';
const { env } = testServices();
const endpoint = env.S3_ENDPOINT!;
let s3: S3Client;

beforeAll(async () => {
	s3 = clientWith(env.S3_ACCESS_KEY_ID!);
	await s3.send(new CreateBucketCommand({ Bucket }));
});
afterAll(() => s3.destroy());

function clientWith(accessKeyId: string): S3Client {
	return new S3Client({
		endpoint,
		region: env.S3_REGION!,
		forcePathStyle: true,
		requestChecksumCalculation: 'WHEN_REQUIRED',
		responseChecksumValidation: 'WHEN_REQUIRED',
		credentials: { accessKeyId, secretAccessKey: env.S3_SECRET_ACCESS_KEY! }
	});
}

async function read(Key: string, Range?: string) {
	const { Body, ContentRange } = await s3.send(new GetObjectCommand({ Bucket, Key, Range }));
	return [await Body?.transformToString(), ContentRange];
}

describe('objects', () => {
	it.each([
		[undefined, '0123456789', undefined],
		['bytes=2-4', '234', 'bytes 2-4/10'],
		['bytes=7-', '789', 'bytes 7-9/10'],
		['bytes=0-0', '0', 'bytes 0-0/10'],
		['bytes=-3', '789', 'bytes 7-9/10'],
		['bytes=-99', '0123456789', 'bytes 0-9/10']
	])('answers the range %s', async (range, content, contentRange) => {
		const Key = 'a folder/ä & <b>.txt';
		await s3.send(new PutObjectCommand({ Bucket, Key, Body: '0123456789' }));
		expect(await read(Key, range)).toEqual([content, contentRange]);
	});

	it('refuses a range past the end', async () => {
		await s3.send(new PutObjectCommand({ Bucket, Key: 'short', Body: 'abc' }));
		await expect(read('short', 'bytes=3-5')).rejects.toMatchObject({ name: 'InvalidRange' });
	});

	it('are handed out to nobody without the key', async () => {
		await s3.send(new PutObjectCommand({ Bucket, Key: 'private', Body: 'x' }));
		expect((await fetch(`${endpoint}/${Bucket}/private`)).status).toBe(403);
		const stranger = clientWith('another-key');
		await expect(stranger.send(new GetObjectCommand({ Bucket, Key: 'private' }))).rejects.toMatchObject({
			name: 'AccessDenied'
		});
	});

	it('appear whole or not at all: an upload that breaks off leaves the old one', async () => {
		await s3.send(new PutObjectCommand({ Bucket, Key: 'steady', Body: 'the first' }));
		const { port, hostname } = new URL(endpoint);
		const headers = {
			authorization: `AWS4-HMAC-SHA256 Credential=${env.S3_ACCESS_KEY_ID}/20260101/local/s3/aws4_request,SignedHeaders=host,Signature=0`,
			'x-amz-content-sha256': 'UNSIGNED-PAYLOAD',
			'x-amz-date': new Date().toISOString().replace(/[-:]|\.\d+/g, ''),
			'content-length': '1000000'
		};
		const cut = request({ method: 'PUT', hostname, port, path: `/${Bucket}/steady`, headers });
		const gone = new Promise((resolve) => cut.once('close', resolve));
		cut.on('error', () => {});
		cut.write('x'.repeat(200_000), () => setTimeout(() => cut.destroy(), 100));
		await gone;
		expect((await read('steady'))[0]).toBe('the first');
		const { Contents = [] } = await s3.send(new ListObjectsV2Command({ Bucket, Prefix: 'steady' }));
		expect(Contents.map((one) => [one.Key, one.Size])).toEqual([['steady', 9]]);
	});

	it('whose content is not what its digest says is refused', async () => {
		const { port, hostname } = new URL(endpoint);
		const headers = {
			authorization: `AWS4-HMAC-SHA256 Credential=${env.S3_ACCESS_KEY_ID}/20260101/local/s3/aws4_request,SignedHeaders=host,Signature=0`,
			'x-amz-content-sha256': '0'.repeat(64),
			'x-amz-date': new Date().toISOString().replace(/[-:]|\.\d+/g, '')
		};
		const status = await new Promise((resolve, reject) => {
			const put = request(
				{ method: 'PUT', hostname, port, path: `/${Bucket}/damaged`, headers },
				(answer) => {
					answer.resume();
					resolve(answer.statusCode);
				}
			);
			put.on('error', reject);
			put.end('not that');
		});
		expect(status).toBe(400);
		await expect(s3.send(new HeadObjectCommand({ Bucket, Key: 'damaged' }))).rejects.toMatchObject({
			name: 'NotFound'
		});
	});
});

describe('uploads in parts', () => {
	const begin = async (Key: string) =>
		(await s3.send(new CreateMultipartUploadCommand({ Bucket, Key }))).UploadId;

	it('list their parts and become one object', async () => {
		const Key = 'parts/whole';
		const UploadId = await begin(Key);
		const put = async (PartNumber: number, Body: string) =>
			(await s3.send(new UploadPartCommand({ Bucket, Key, UploadId, PartNumber, Body }))).ETag;
		const second = await put(2, 'two');
		const first = await put(1, 'one ');
		const listed = await s3.send(new ListPartsCommand({ Bucket, Key, UploadId, MaxParts: 1 }));
		expect([listed.IsTruncated, listed.Parts?.map((p) => [p.PartNumber, p.Size, p.ETag])]).toEqual([
			true,
			[[1, 4, first]]
		]);
		const rest = await s3.send(
			new ListPartsCommand({ Bucket, Key, UploadId, PartNumberMarker: listed.NextPartNumberMarker })
		);
		expect(rest.Parts?.map((p) => p.PartNumber)).toEqual([2]);
		const complete = (ETag: string | undefined) =>
			s3.send(
				new CompleteMultipartUploadCommand({
					Bucket,
					Key,
					UploadId,
					MultipartUpload: {
						Parts: [
							{ PartNumber: 1, ETag: first },
							{ PartNumber: 2, ETag }
						]
					}
				})
			);
		await expect(complete('"00000000000000000000000000000000"')).rejects.toMatchObject({
			name: 'InvalidPart'
		});
		await complete(second);
		expect((await read(Key))[0]).toBe('one two');
	});

	it('can be given up, and are unknown from then on', async () => {
		const Key = 'parts/given-up';
		const UploadId = await begin(Key);
		await s3.send(new UploadPartCommand({ Bucket, Key, UploadId, PartNumber: 1, Body: 'x' }));
		await s3.send(new AbortMultipartUploadCommand({ Bucket, Key, UploadId }));
		await expect(s3.send(new ListPartsCommand({ Bucket, Key, UploadId }))).rejects.toMatchObject({
			name: 'NoSuchUpload'
		});
	});
});
