import { crc32 } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { clearPosition } from './position';

/** Big-endian TIFF: IFD0 with a camera's name and the link to a GPS directory with a latitude of three rationals. */
function tiff(): Buffer {
	const block = Buffer.alloc(8 + 30 + 30 + 24 + 8);
	block.write('MM\0*', 'latin1');
	block.writeUInt32BE(8, 4);
	block.writeUInt16BE(2, 8);
	const entry = (at: number, tag: number, type: number, count: number, value: number) => {
		block.writeUInt16BE(tag, at);
		block.writeUInt16BE(type, at + 2);
		block.writeUInt32BE(count, at + 4);
		block.writeUInt32BE(value, at + 8);
	};
	entry(10, 0x010f, 2, 8, 92);
	entry(22, 0x8825, 4, 1, 38);
	block.writeUInt16BE(2, 38);
	entry(40, 1, 2, 2, 0x4e000000);
	entry(52, 2, 5, 3, 68);
	[57, 1, 42, 1, 1234, 100].forEach((part, n) => block.writeUInt32BE(part, 68 + 4 * n));
	block.write('Bellows\0', 92, 'latin1');
	return block;
}
const xmp = `<rdf exif:GPSLatitude="57,42.205N" tiff:Make="Bellows"><exif:GPSLongitude>11,58E</exif:GPSLongitude></rdf>`;

function segment(marker: number, body: Buffer): Buffer {
	const head = Buffer.from([0xff, marker, 0, 0]);
	head.writeUInt16BE(body.length + 2, 2);
	return Buffer.concat([head, body]);
}
const jpeg = () =>
	Buffer.concat([
		Buffer.from([0xff, 0xd8]),
		segment(0xe1, Buffer.concat([Buffer.from('Exif\0\0', 'latin1'), tiff()])),
		segment(0xe1, Buffer.from(`http://ns.adobe.com/xap/1.0/\0${xmp}`, 'latin1')),
		Buffer.from([0xff, 0xda, 1, 2, 3])
	]);

function png(): Buffer {
	const body = Buffer.concat([Buffer.from('eXIf'), tiff()]);
	const chunk = Buffer.alloc(body.length + 8);
	chunk.writeUInt32BE(body.length - 4, 0);
	body.copy(chunk, 4);
	chunk.writeUInt32BE(crc32(body), body.length + 4);
	return Buffer.concat([Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'), chunk]);
}

const LATITUDE = Buffer.from([0, 0, 0, 57, 0, 0, 0, 1, 0, 0, 0, 42]);

describe('a photograph’s position', () => {
	it('goes from a JPEG, whose length, camera and picture stay', () => {
		const picture = jpeg();
		const before = picture.length;
		expect(picture.includes(LATITUDE)).toBe(true);
		expect(clearPosition(picture, 'image/jpeg')).toBe(true);
		expect(picture).toHaveLength(before);
		expect(picture.includes(LATITUDE)).toBe(false);
		expect(picture.toString('latin1')).not.toMatch(/57,42|11,58/);
		expect(picture.toString('latin1')).toContain('Bellows');
		expect(picture.subarray(-3)).toEqual(Buffer.from([1, 2, 3]));
		expect(clearPosition(picture, 'image/jpeg')).toBe(false);
	});

	it('goes from a PNG, whose checksum is right again', () => {
		const picture = png();
		expect(clearPosition(picture, 'image/png')).toBe(true);
		expect(picture.includes(LATITUDE)).toBe(false);
		expect(picture.readUInt32BE(picture.length - 4)).toBe(crc32(picture.subarray(12, picture.length - 4)));
	});

	it('goes from a WebP', () => {
		const head = Buffer.from('RIFF\0\0\0\0WEBPEXIF\0\0\0\0', 'latin1');
		head.writeUInt32LE(tiff().length, 16);
		const picture = Buffer.concat([head, tiff()]);
		expect(clearPosition(picture, 'image/webp')).toBe(true);
		expect(picture.includes(LATITUDE)).toBe(false);
	});

	it('is not looked for where a file is cut, bent or no picture', () => {
		for (let length = 0; length < jpeg().length; length++)
			expect(() => clearPosition(jpeg().subarray(0, length), 'image/jpeg')).not.toThrow();
		const bent = jpeg();
		bent.writeUInt32BE(0xffffff00, 2 + 4 + 6 + 30);
		expect(() => clearPosition(bent, 'image/jpeg')).not.toThrow();
		expect(clearPosition(Buffer.from('%PDF-1.4'), 'application/pdf')).toBe(false);
	});
});
