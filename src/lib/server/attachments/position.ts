import { crc32 } from 'node:zlib';

/** Where Exif data (a TIFF block) and XMP text lie in a picture, and what has to follow a change of them. */
interface Block {
	from: number;
	to: number;
	kind: 'exif' | 'xmp';
	/** Where the checksum of the chunk stands, and from where on it is taken: PNG only. */
	checksum?: { at: number; from: number };
}

const GPS_IFD = 0x8825;
const ENTRY_BYTES = 12;
/** Bytes of one value by its type, as TIFF 6.0 numbers them. */
const TYPE_BYTES = [0, 1, 1, 2, 4, 8, 1, 1, 2, 4, 8, 4, 8];
const EXIF_HEAD = Buffer.from('Exif\0\0', 'latin1');
const XMP_HEAD = Buffer.from('http://ns.adobe.com/xap/1.0/\0', 'latin1');

function jpegBlocks(bytes: Buffer): Block[] {
	const found: Block[] = [];
	// Segments up to the start of the scan: marker, length of what follows with its own two bytes.
	for (let at = 2; at + 4 <= bytes.length && bytes[at] === 0xff && bytes[at + 1] !== 0xda;) {
		const from = at + 4;
		const to = at + 2 + bytes.readUInt16BE(at + 2);
		if (to < from || to > bytes.length) break;
		const startsWith = (head: Buffer) => bytes.subarray(from, to).indexOf(head) === 0;
		if (bytes[at + 1] === 0xe1 && startsWith(EXIF_HEAD))
			found.push({ from: from + EXIF_HEAD.length, to, kind: 'exif' });
		if (bytes[at + 1] === 0xe1 && startsWith(XMP_HEAD)) found.push({ from, to, kind: 'xmp' });
		at = to;
	}
	return found;
}

function pngBlocks(bytes: Buffer): Block[] {
	const found: Block[] = [];
	for (let at = 8; at + 12 <= bytes.length;) {
		const to = at + 8 + bytes.readUInt32BE(at);
		if (to + 4 > bytes.length) break;
		const name = bytes.toString('latin1', at + 4, at + 8);
		const checksum = { at: to, from: at + 4 };
		if (name === 'eXIf') found.push({ from: at + 8, to, kind: 'exif', checksum });
		if (name === 'iTXt') found.push({ from: at + 8, to, kind: 'xmp', checksum });
		at = to + 4;
	}
	return found;
}

function webpBlocks(bytes: Buffer): Block[] {
	const found: Block[] = [];
	for (let at = 12; at + 8 <= bytes.length;) {
		const to = at + 8 + bytes.readUInt32LE(at + 4);
		if (to > bytes.length) break;
		const name = bytes.toString('latin1', at, at + 4);
		const hasHead = bytes.subarray(at + 8, to).indexOf(EXIF_HEAD) === 0;
		if (name === 'EXIF') found.push({ from: at + 8 + (hasHead ? EXIF_HEAD.length : 0), to, kind: 'exif' });
		if (name === 'XMP ') found.push({ from: at + 8, to, kind: 'xmp' });
		at = to + (to % 2);
	}
	return found;
}

const BLOCKS: Readonly<Record<string, (bytes: Buffer) => Block[]>> = {
	'image/jpeg': jpegBlocks,
	'image/png': pngBlocks,
	'image/webp': webpBlocks
};

/** Empties the position's directory, and the values that lie elsewhere for it. */
function emptyGps(tiff: Buffer): boolean {
	const isLittle = tiff.toString('latin1', 0, 2) === 'II';
	const u16 = (at: number) => (isLittle ? tiff.readUInt16LE(at) : tiff.readUInt16BE(at));
	const u32 = (at: number) => (isLittle ? tiff.readUInt32LE(at) : tiff.readUInt32BE(at));
	const entries = (ifd: number) => Array.from({ length: u16(ifd) }, (_, n) => ifd + 2 + n * ENTRY_BYTES);
	const link = entries(u32(4)).find((at) => u16(at) === GPS_IFD);
	if (link === undefined) return false;
	const gps = u32(link + 8);
	const all = entries(gps);
	for (const at of all) {
		const bytes = (TYPE_BYTES[u16(at + 2)] ?? 0) * u32(at + 4);
		if (bytes > 4) tiff.fill(0, u32(at + 8), Math.min(tiff.length, u32(at + 8) + bytes));
	}
	tiff.fill(0, gps, gps + 2 + all.length * ENTRY_BYTES);
	return all.length > 0;
}

/** Blanks what XMP says of the position; lengths stay. */
function blankGps(block: Buffer): boolean {
	const text = block.toString('latin1');
	const blank = text.replace(
		/(exif:GPS\w+\s*(?:=\s*["']|>))([^"'<]*)/g,
		(_, name: string, value: string) => name + ' '.repeat(value.length)
	);
	block.write(blank, 'latin1');
	return blank !== text;
}

/**
 * Takes from a photograph where it was taken: whoever may see an engine need not learn where someone's telephone was. In
 * place, so that nothing moves; picture, turning and time of exposure stay.
 *
 * @returns whether anything was changed; what cannot be read as Exif is left as it is
 */
export function clearPosition(bytes: Buffer, contentType: string): boolean {
	let isChanged = false;
	for (const { from, to, kind, checksum } of BLOCKS[contentType]?.(bytes) ?? []) {
		const block = bytes.subarray(from, to);
		try {
			if (!(kind === 'exif' ? emptyGps(block) : blankGps(block))) continue;
		} catch (cause) {
			if (!(cause instanceof RangeError)) throw cause;
			continue;
		}
		isChanged = true;
		if (checksum) bytes.writeUInt32BE(crc32(bytes.subarray(checksum.from, to)), checksum.at);
	}
	return isChanged;
}
