import { chmodSync, mkdirSync, mkdtempSync, readdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { codeOf, readJson, root, writeSecretJson } from './place.js';
import { isAlive, markOf } from './processes.js';

/**
 * The throw-away folder of one test run, in /var/tmp, where the database server's user can get in any case. A run that
 * failed leaves it for reading; the next run clears it away.
 */

const runs = path.join(root, '.test', 'runs');

/** @returns {{ folder: string, remove: () => void }} */
export function makeTestFolder() {
	mkdirSync(runs, { recursive: true });
	clearOldFolders();
	const folder = mkdtempSync('/var/tmp/trunnion-test-');
	chmodSync(folder, 0o711);
	const note = path.join(runs, `${path.basename(folder)}.json`);
	writeSecretJson(note, { folder, runner: markOf(process.pid) });
	return {
		folder,
		remove: () => {
			rmSync(folder, { recursive: true, force: true });
			rmSync(note, { force: true });
		}
	};
}

function clearOldFolders() {
	for (const name of readdirSync(runs)) {
		const note = path.join(runs, name);
		const run = /** @type {{ folder?: string, runner?: import('./processes.js').Mark } | null} */ (
			readJson(note)
		);
		if (run?.runner && isAlive(run.runner)) continue;
		try {
			if (run?.folder?.startsWith('/var/tmp/trunnion-test-'))
				rmSync(run.folder, { recursive: true, force: true });
			rmSync(note, { force: true });
		} catch (error) {
			// Another user's run: theirs to clear.
			if (!['EACCES', 'EPERM'].includes(codeOf(error))) throw error;
		}
	}
}
