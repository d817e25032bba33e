/**
 * From bytes to text. A text file says its encoding by a byte-order mark or by what its bytes can be; what is no text
 * is refused with a sentence that says what the file is and what to do.
 */

type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

export type Decoded =
	| {
			ok: true;
			text: string;
			encoding: Encoding;
			/** NUL bytes left out (a logger that lost power pads its file with them). */
			nulBytes: number;
	  }
	| { ok: false; error: string };

const SNIFF_BYTES = 1 << 16;

/** What one string of the language can hold, with room to spare. */
const MOST_BYTES = 500e6;

const EMPTY =
	'The file is empty. Look at the measuring system for the recording, export it again and upload that file.';

/** What a file is that starts with these bytes, and what to do with it. */
const SIGNATURES: readonly (readonly [bytes: readonly number[], sentence: string])[] = [
	[
		[0x50, 0x4b, 0x03, 0x04],
		'This is a spreadsheet workbook (.xlsx) or a zip archive, not a text file. Save the sheet as CSV, or unpack the archive, and upload that.'
	],
	[
		[0xd0, 0xcf, 0x11, 0xe0],
		'This is a spreadsheet workbook (.xls), not a text file. Save the sheet as CSV and upload that.'
	],
	[
		[0x25, 0x50, 0x44, 0x46],
		'This is a PDF document, not a trace. Export the samples as CSV or text from the measuring system.'
	],
	[[0x1f, 0x8b], 'This file is compressed (gzip). Unpack it and upload the CSV or text file inside.'],
	[
		[0x4d, 0x44, 0x46, 0x20, 0x20],
		'This is a binary measurement file. Export it as CSV or text and upload that.'
	],
	[[0x54, 0x44, 0x53, 0x6d], 'This is a binary measurement file. Export it as CSV or text and upload that.'],
	[[0x89, 0x48, 0x44, 0x46], 'This is a binary measurement file. Export it as CSV or text and upload that.'],
	[
		[0x50, 0x41, 0x52, 0x31],
		'This is a binary table (Parquet), not a text file. Export the samples as CSV or text and upload that.'
	],
	[[0x89, 0x50, 0x4e, 0x47], 'This is a picture, not a trace. Export the samples as CSV or text.'],
	[[0xff, 0xd8, 0xff], 'This is a picture, not a trace. Export the samples as CSV or text.']
];

const BINARY =
	'The file holds binary data, not text with columns. Export the samples as CSV or text from the measuring system and upload that file.';

const PAGE =
	'This is a web page, not a trace; often a sign-in page that was saved when a session had ended. Fetch the file again from the measuring system.';

const STRUCTURED =
	'This is an XML or JSON document, not a table of samples. Export the samples as CSV or text and upload that file.';

function startsWith(bytes: Uint8Array, head: readonly number[]): boolean {
	return head.every((value, at) => bytes[at] === value);
}

/** UTF-16 without a mark shows as a NUL in every other byte of Latin text. */
function utf16ByPattern(bytes: Uint8Array): Encoding | null {
	const length = Math.min(bytes.length, SNIFF_BYTES) & ~1;
	if (length < 8) return null;
	let even = 0;
	let odd = 0;
	for (let i = 0; i < length; i += 2) {
		if (bytes[i] === 0) even++;
		if (bytes[i + 1] === 0) odd++;
	}
	const pairs = length / 2;
	if (odd > 0.6 * pairs && even < 0.05 * pairs) return 'utf-16le';
	if (even > 0.6 * pairs && odd < 0.05 * pairs) return 'utf-16be';
	return null;
}

function isControl(byte: number): boolean {
	return byte < 32 && byte !== 9 && byte !== 10 && byte !== 13 && byte !== 12 && byte !== 0;
}

/** Text has next to no control characters; the five bytes that Windows-1252 leaves undefined count as such. */
function looksBinary(bytes: Uint8Array): boolean {
	const end = Math.min(bytes.length, SNIFF_BYTES);
	let odd = 0;
	let nul = 0;
	for (let i = 0; i < end; i++) {
		const byte = bytes[i]!;
		if (byte === 0) nul++;
		else if (isControl(byte) || byte === 0x7f) odd++;
	}
	const seen = end - nul;
	// Padding comes in one piece; NULs sprinkled through are binary data.
	return odd > 0.005 * seen + 2 || (nul > 0 && nulRuns(bytes, end) > 8);
}

function nulRuns(bytes: Uint8Array, end: number): number {
	let runs = 0;
	for (let i = 0; i < end; i++) if (bytes[i] === 0 && (i === 0 || bytes[i - 1] !== 0)) runs++;
	return runs;
}

function withoutNuls(bytes: Uint8Array): { bytes: Uint8Array; nulBytes: number } {
	const first = bytes.indexOf(0);
	if (first < 0) return { bytes, nulBytes: 0 };
	const kept = new Uint8Array(bytes.length);
	kept.set(bytes.subarray(0, first));
	let length = first;
	for (let i = first; i < bytes.length; i++) if (bytes[i] !== 0) kept[length++] = bytes[i]!;
	return { bytes: kept.subarray(0, length), nulBytes: bytes.length - length };
}

/** Drops the start of a UTF-8 character that the end of the file cuts off, so that it does not spoil all the rest. */
function wholeCharacters(bytes: Uint8Array): Uint8Array {
	for (let back = 1; back <= Math.min(3, bytes.length); back++) {
		const byte = bytes[bytes.length - back]!;
		if ((byte & 0xc0) === 0x80) continue;
		const needed = byte >= 0xf0 ? 4 : byte >= 0xe0 ? 3 : byte >= 0xc0 ? 2 : 1;
		return needed > back ? bytes.subarray(0, bytes.length - back) : bytes;
	}
	return bytes;
}

function decodeBytes(bytes: Uint8Array): { text: string; encoding: Encoding; nulBytes: number } | null {
	const marked = startsWith(bytes, [0xff, 0xfe])
		? 'utf-16le'
		: startsWith(bytes, [0xfe, 0xff])
			? 'utf-16be'
			: null;
	const wide = marked ?? utf16ByPattern(bytes);
	if (wide) {
		const text = new TextDecoder(wide).decode(bytes.subarray(0, bytes.length & ~1));
		const clean = text.replaceAll('\0', '');
		return { text: clean, encoding: wide, nulBytes: text.length - clean.length };
	}
	if (looksBinary(bytes)) return null;
	const { bytes: kept, nulBytes } = withoutNuls(bytes);
	try {
		const text = new TextDecoder('utf-8', { fatal: true }).decode(wholeCharacters(kept));
		return { text, encoding: 'utf-8', nulBytes };
	} catch {
		// Latin-1 is what Windows-1252 is without its punctuation, so one decoder reads both.
		return { text: new TextDecoder('windows-1252').decode(kept), encoding: 'windows-1252', nulBytes };
	}
}

/** A wide text of random bytes decodes into scripts that no trace is written in. */
function looksLikeText(text: string): boolean {
	const sample = text.slice(0, 4000);
	let known = 0;
	for (const character of sample) {
		const code = character.codePointAt(0)!;
		if (code === 9 || code === 10 || code === 13 || (code >= 32 && code < 0x2300)) known++;
	}
	return known >= 0.7 * sample.length;
}

/**
 * Decodes a file: UTF-8 and UTF-16 (with a byte-order mark or told by their bytes), else Windows-1252.
 *
 * @returns the text without its mark and without NUL padding, or a refusal for what is empty or no text table
 */
export function decode(bytes: Uint8Array): Decoded {
	if (bytes.length === 0 || bytes.every((byte) => byte === 0)) return { ok: false, error: EMPTY };
	if (bytes.length > MOST_BYTES)
		return {
			ok: false,
			error: `The file is ${Math.round(bytes.length / 1e6)} MB; up to ${MOST_BYTES / 1e6} MB can be read. Split the recording, or export only the channels that this run needs.`
		};
	const known = SIGNATURES.find(([head]) => startsWith(bytes, head));
	if (known) return { ok: false, error: known[1] };
	const decoded = decodeBytes(bytes);
	if (!decoded || !looksLikeText(decoded.text)) return { ok: false, error: BINARY };
	const head = decoded.text.slice(0, 4000).trimStart();
	if (head === '' && decoded.text.trim() === '') return { ok: false, error: EMPTY };
	if (/^<(!doctype\s+html|html|head|body|!--)/i.test(head)) return { ok: false, error: PAGE };
	if (/^<\?xml|^<[a-z][\w:-]*[\s/>]|^[{[]\s*["{[]/i.test(head)) {
		return { ok: false, error: /<html/i.test(head) ? PAGE : STRUCTURED };
	}
	return { ok: true, ...decoded };
}
