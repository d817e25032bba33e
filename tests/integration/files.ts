/** The smallest of each kind that may be attached: enough for what tells a file by its bytes. */
const bytes = (text: string, encoding: BufferEncoding) => new Uint8Array(Buffer.from(text, encoding));

/** One grey pixel. */
export const PNG = bytes(
	'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAAAAAA6fptVAAAACklEQVR4nGNoAAAAggCBd81ytgAAAABJRU5ErkJggg==',
	'base64'
);
export const JPEG = bytes('ffd8ffe000104a46494600010100000100010000ffd9', 'hex');
export const WEBP = bytes(
	'RIFF\x1a\0\0\0WEBPVP8L\r\0\0\0/\0\0\0\x10\x07\x10\x11\x11\x88\x88\xfe\x07\0',
	'latin1'
);
export const PDF = bytes(
	'%PDF-1.4\n1 0 obj<</Type/Catalog>>endobj\ntrailer<</Root 1 0 R>>\n%%EOF\n',
	'latin1'
);
