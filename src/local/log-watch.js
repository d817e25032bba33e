import { closeSync, openSync, readSync, statSync } from 'node:fs';

const ERROR = 50; // the logger's level for errors

/**
 * Shows on the console what a log file gains in errors; the rest stays in the file.
 * @param {string} name
 * @param {string} file
 * @returns {() => void} ends it
 */
export function watchForErrors(name, file) {
	return watchLines(file, (line) => {
		const told = errorIn(line);
		if (told) console.error(`[${name}] ${told}`);
	});
}

/**
 * Hands on every line that a log file gains.
 * @param {string} file
 * @param {(line: string) => void} each
 * @returns {() => void} ends it
 */
export function watchLines(file, each) {
	let at = sizeOf(file);
	let cut = '';
	const look = () => {
		const size = sizeOf(file);
		if (size < at) at = 0; // it was begun anew
		if (size === at) return;
		const bytes = Buffer.alloc(Math.min(size - at, 1_000_000));
		const handle = openSync(file, 'r');
		at += readSync(handle, bytes, 0, bytes.length, at);
		closeSync(handle);
		const lines = (cut + bytes.toString('utf8')).split('\n');
		cut = lines.pop() ?? '';
		lines.forEach(each);
	};
	const timer = setInterval(look, 500);
	timer.unref();
	return () => {
		clearInterval(timer);
		look();
	};
}

/** @param {string} line */
function errorIn(line) {
	if (!line.startsWith('{')) return /^(FATAL|PANIC|\w*Error:)/.test(line) ? line : null;
	try {
		const entry = JSON.parse(line);
		return entry.level >= ERROR ? [entry.msg, entry.err?.message].filter(Boolean).join(': ') : null;
	} catch {
		return null;
	}
}

/** @param {string} file */
function sizeOf(file) {
	try {
		return statSync(file).size;
	} catch {
		return 0;
	}
}
