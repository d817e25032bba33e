import { chmodSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { userInfo } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder of the clone, whatever the working directory is. */
export const root = path.resolve(fileURLToPath(import.meta.url), '../../..');

/** Everything that the launcher keeps between starts; git ignores it. */
export const localFolder = path.join(root, '.local');

/** A failure that a person can mend: its message is one sentence and what to do, and is all that is shown. */
export class Mendable extends Error {}

/** The name of the user who runs this; a container may run as a number without one. */
function whoWeAre() {
	try {
		return userInfo().username;
	} catch {
		return String(process.getuid?.());
	}
}

/** @param {unknown} error */
export const codeOf = (error) =>
	error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : '';

/** @param {unknown} error */
export const textOf = (error) => (error instanceof Error ? error.message : String(error));

/**
 * Makes a folder that the database server's user may pass through but not list.
 * @param {string} folder
 */
export function makeFolder(folder) {
	try {
		mkdirSync(folder, { recursive: true });
		if (folder === localFolder) chmodSync(folder, 0o711);
	} catch (error) {
		const code = codeOf(error);
		if (!['EACCES', 'EPERM', 'EROFS'].includes(code)) throw error;
		throw new Mendable(
			`${folder} cannot be written by ${whoWeAre()} (${code}). ` +
				`Run as the owner of ${root}, or give this user the folder: chown -R ${whoWeAre()} ${root}`
		);
	}
}

/**
 * @param {string} file
 * @returns {unknown} null when the file is not there or was cut off in writing
 */
export function readJson(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch (error) {
		if (codeOf(error) === 'ENOENT' || error instanceof SyntaxError) return null;
		throw error;
	}
}

/**
 * Writes a file with secrets: only its owner may read it, and a reader sees the old one or the new one whole.
 * @param {string} file
 * @param {unknown} value
 */
export function writeSecretJson(file, value) {
	const next = `${file}.${process.pid}.new`;
	writeFileSync(next, JSON.stringify(value, null, '\t') + '\n', { mode: 0o600 });
	renameSync(next, file);
}
