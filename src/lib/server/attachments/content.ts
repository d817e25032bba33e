import { createHash } from 'node:crypto';
import { open, readFile, writeFile } from 'node:fs/promises';
import { fileTypeFromBuffer } from 'file-type';
import type { Spooled } from '../files';
import { Problem } from '../problem';
import { clearPosition } from './position';

/** What is kept, by what the bytes say; each with the endings that a name of it may have. */
const KEPT: Record<string, readonly string[]> = {
	'image/jpeg': ['jpg', 'jpeg'],
	'image/png': ['png'],
	'image/webp': ['webp'],
	'application/pdf': ['pdf']
};

/** Enough of a file for every mark that tells its kind. */
const HEAD_BYTES = 4100;

/**
 * What a file is by its own bytes; the sender's word on it is not asked.
 * @throws Problem 415 for anything but a photograph or a PDF
 */
export async function contentTypeOf(file: string): Promise<string> {
	const handle = await open(file);
	try {
		const { buffer, bytesRead } = await handle.read(Buffer.alloc(HEAD_BYTES), 0, HEAD_BYTES, 0);
		if (bytesRead === 0) throw notKept('This file is empty.');
		const found = (await fileTypeFromBuffer(buffer.subarray(0, bytesRead)))?.mime;
		if (found && found in KEPT) return found;
		if (found?.startsWith('image/hei'))
			throw notKept('This is a HEIC photograph, which few programs open. Send it as JPEG.');
		if (found) throw notKept(`By what it holds this file is ${found}, whatever its name says.`);
		throw notKept('By what it holds this file is none of these, whatever its name says.');
	} finally {
		await handle.close();
	}
}

const notKept = (why: string) =>
	new Problem(415, 'Not kept', `Photographs (JPEG, PNG, WebP) and PDF documents are kept. ${why}`);

/** The file without the place where a photograph was taken, and with the hash of what is left. */
export async function withoutPosition(spooled: Spooled, contentType: string): Promise<Spooled> {
	if (!contentType.startsWith('image/')) return spooled;
	const bytes = await readFile(spooled.file);
	if (!clearPosition(bytes, contentType)) return spooled;
	await writeFile(spooled.file, bytes);
	return { ...spooled, sha256: createHash('sha256').update(bytes).digest() };
}

/** The name with an ending that fits: a picture called `note.html` must not lie on a disk as a page. */
export function fittingName(filename: string, contentType: string): string {
	const endings = KEPT[contentType]!;
	const ending = /\.([a-z0-9]+)$/i.exec(filename)?.[1]?.toLowerCase();
	return ending && endings.includes(ending) ? filename : `${filename}.${endings[0]}`;
}
