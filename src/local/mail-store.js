import { mkdirSync, readFileSync, readdirSync } from 'node:fs';
import { readFile, rename, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { simpleParser } from 'mailparser';

/**
 * Caught mail in a folder: `<number>.eml` as it came in, `<number>.json` with what the list shows.
 * @typedef {{ number: number, at: string, from: string, to: string[], subject: string, messageId: string, text: string,
 *   hasHtml: boolean, attachments: { filename: string, contentType: string, sizeB: number }[] }} Summary
 * @typedef {{ html: string | null, attachments: { filename: string, content: Buffer }[] }} Parts
 */

export class MailStore {
	/** @type {Summary[]} oldest first */
	summaries = [];

	/** @param {string} folder */
	constructor(folder) {
		this.folder = folder;
		mkdirSync(folder, { recursive: true, mode: 0o700 });
		const numbers = readdirSync(folder)
			.map((name) => /^(\d+)\.json$/.exec(name)?.[1])
			.filter((one) => one !== undefined)
			.map(Number)
			.sort((a, b) => a - b);
		for (const number of numbers)
			this.summaries.push(JSON.parse(readFileSync(this.file(number, 'json'), 'utf8')));
		this.last = numbers.at(-1) ?? 0;
	}

	/**
	 * @param {number} number
	 * @param {'eml' | 'json'} kind
	 */
	file(number, kind) {
		return path.join(this.folder, `${number}.${kind}`);
	}

	/**
	 * @param {Buffer} raw
	 * @param {{ from: string, to: string[] }} envelope
	 */
	async add(raw, { from, to }) {
		const number = ++this.last;
		await writeFile(this.file(number, 'eml'), raw, { mode: 0o600 });
		const mail = await simpleParser(raw, { skipImageLinks: true, skipTextToHtml: true });
		/** @type {Summary} */
		const summary = {
			number,
			at: new Date().toISOString(),
			from,
			to,
			subject: mail.subject ?? '',
			messageId: mail.messageId ?? '',
			text: mail.text ?? '',
			hasHtml: typeof mail.html === 'string',
			attachments: mail.attachments.map((one) => ({
				filename: one.filename ?? 'attachment',
				contentType: one.contentType,
				sizeB: one.size
			}))
		};
		const unfinished = `${this.file(number, 'json')}.new`;
		await writeFile(unfinished, JSON.stringify(summary), { mode: 0o600 });
		await rename(unfinished, this.file(number, 'json'));
		this.summaries.push(summary);
	}

	/** @param {number} number */
	find(number) {
		return this.summaries.find((one) => one.number === number) ?? null;
	}

	/** @param {number} number */
	raw(number) {
		return readFile(this.file(number, 'eml'));
	}

	/**
	 * @param {number} number
	 * @returns {Promise<Parts>}
	 */
	async parts(number) {
		const mail = await simpleParser(await this.raw(number), { skipImageLinks: true, skipTextToHtml: true });
		return {
			html: typeof mail.html === 'string' ? mail.html : null,
			attachments: mail.attachments.map((one) => ({
				filename: one.filename ?? 'attachment',
				content: one.content
			}))
		};
	}
}
