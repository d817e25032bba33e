import { createServer } from 'node:http';
import { parseArgs } from 'node:util';
import S3rver from 's3rver';
import accounts from 's3rver/lib/models/account.js';
import S3Error from 's3rver/lib/models/error.js';
import { beforeStore, storeSafely } from './object-store-protocol.js';

/**
 * The object store of a machine that has none: the S3 protocol on a loopback port over a folder.
 * `node object-store.js --folder F --bucket B [--throw-away]` with the keys in the environment; tells its parent the port.
 */
const { values } = parseArgs({
	options: {
		folder: { type: 'string' },
		bucket: { type: 'string' },
		'throw-away': { type: 'boolean', default: false }
	}
});
const accessKeyId = process.env.S3_ACCESS_KEY_ID;
const secretAccessKey = process.env.S3_SECRET_ACCESS_KEY;
if (!values.folder || !values.bucket || !accessKeyId || !secretAccessKey)
	throw new Error('object-store.js needs --folder, --bucket, S3_ACCESS_KEY_ID and S3_SECRET_ACCESS_KEY.');

process.umask(0o077);
accounts.DUMMY_ACCOUNT.createKeyPair(accessKeyId, secretAccessKey);
const s3 = new S3rver({ directory: values.folder, silent: true, vhostBuckets: false });
s3.on('error', (error) => {
	if (!(error instanceof S3Error) || error.status >= 500) console.error(new Date().toISOString(), error);
});
storeSafely(s3.store, values.folder, !values['throw-away']);
await s3.store.putBucket(values.bucket);

const handle = s3.callback();
const server = createServer((request, response) => {
	beforeStore(s3.store, accessKeyId, request, response).then(
		(done) => {
			if (!done) handle(request, response);
		},
		(error) => {
			const told =
				error instanceof S3Error ? error : new S3Error('InternalError', 'The object store failed.');
			if (told !== error) console.error(new Date().toISOString(), error);
			response.writeHead(told.status, { 'content-type': 'application/xml' }).end(told.toXML());
			request.resume();
		}
	);
});
// An upload may be slow; the application sets its own limits.
server.requestTimeout = 0;
server.listen({ host: '127.0.0.1', port: 0 }, () => {
	const address = server.address();
	process.send?.({ port: typeof address === 'object' && address ? address.port : 0 });
});
const stop = () => {
	server.close(() => process.exit(0));
	server.closeIdleConnections();
	setTimeout(() => process.exit(0), 2_000).unref();
};
process.once('SIGTERM', stop);
process.once('disconnect', stop);
