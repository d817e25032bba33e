import { describe, expect, it } from 'vitest';
import { decode } from './decode';

const utf8 = (text: string) => new TextEncoder().encode(text);
const bytes = (...values: number[]) => Uint8Array.from(values);
const utf16 = (text: string, littleEndian: boolean, mark: boolean) => {
	const out = new Uint8Array(2 * text.length + (mark ? 2 : 0));
	const view = new DataView(out.buffer);
	if (mark) view.setUint16(0, 0xfeff, littleEndian);
	for (let i = 0; i < text.length; i++)
		view.setUint16(2 * i + (mark ? 2 : 0), text.charCodeAt(i), littleEndian);
	return out;
};
const table = 'Zeit;Öl °C\n0,0;80,1\n0,1;80,2\n';

describe('decode', () => {
	it.each([
		['UTF-8', utf8(table), 'utf-8'],
		['UTF-8 with its mark', utf8('\uFEFF' + table), 'utf-8'],
		['UTF-16, little end first', utf16(table, true, true), 'utf-16le'],
		['UTF-16, big end first', utf16(table, false, true), 'utf-16be'],
		['UTF-16 without a mark', utf16(table, true, false), 'utf-16le'],
		['Windows-1252', Uint8Array.from(table, (character) => character.charCodeAt(0)), 'windows-1252']
	])('reads %s', (_, file, encoding) => {
		const decoded = decode(file);
		expect(decoded).toMatchObject({ ok: true, text: table, encoding });
	});

	it('leaves out the NUL padding of a logger that lost power, and counts it', () => {
		const padded = new Uint8Array(table.length + 1000);
		padded.set(utf8('time [s],a\n0,1\n0.1,2\n'));
		expect(decode(padded)).toMatchObject({
			ok: true,
			text: 'time [s],a\n0,1\n0.1,2\n',
			nulBytes: padded.length - 21
		});
	});

	it('keeps reading UTF-8 that is cut inside its last character', () => {
		const cut = utf8('T [°C]\n20 °').slice(0, -1);
		expect(decode(cut)).toMatchObject({ ok: true, encoding: 'utf-8', text: 'T [°C]\n20 ' });
	});

	it.each([
		['nothing', bytes(), /empty/],
		['only NULs', new Uint8Array(500), /empty/],
		['only blanks', utf8(' \n\n  \r\n'), /empty/],
		['a zip or workbook', bytes(0x50, 0x4b, 3, 4, 20, 0), /spreadsheet workbook/],
		['an old workbook', bytes(0xd0, 0xcf, 0x11, 0xe0, 0xa1), /spreadsheet workbook/],
		['a PDF', utf8('%PDF-1.7\n'), /PDF/],
		['gzip', bytes(0x1f, 0x8b, 8, 0), /compressed/],
		['a web page', utf8('\n<!DOCTYPE html><html><body>Session expired</body></html>'), /web page/],
		['a page in capitals', utf8('<HTML><BODY>x</BODY></HTML>'), /web page/],
		['JSON', utf8('{"error": "not found"}'), /JSON/],
		['XML', utf8('<?xml version="1.0"?><data/>'), /XML/],
		['bytes at random', Uint8Array.from({ length: 4000 }, (_, i) => (i * i * 31 + i * 17) % 256), /binary/]
	])('refuses %s with a sentence', (_, file, sentence) => {
		const decoded = decode(file);
		expect(decoded.ok).toBe(false);
		expect(!decoded.ok && decoded.error).toMatch(sentence);
	});
});
