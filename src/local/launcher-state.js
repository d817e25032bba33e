import { linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Mendable, codeOf, localFolder, readJson, writeSecretJson } from './place.js';
import { endProcess, isAlive, markOf } from './processes.js';

/**
 * What runs now, for `npm run admin`, for a second start, and for the start after a crash.
 * @typedef {import('./processes.js').Mark} Mark
 * @typedef {{ launcher: Mark, ready: boolean, address: string, mailPage: string | null, processes: Record<string, Mark>,
 *   env: Record<string, string> }} RunState
 */

const runFile = path.join(localFolder, 'run.json');
const lockFile = path.join(localFolder, 'launcher.lock');

/** @returns {RunState | null} */
function readRunState() {
	const state = /** @type {RunState | null} */ (readJson(runFile));
	return state && typeof state.launcher?.pid === 'number' ? state : null;
}

/** @returns {RunState | null} the state that a living launcher wrote */
export function livingRunState() {
	const state = readRunState();
	return state && isAlive(state.launcher) ? state : null;
}

/** @param {RunState} state */
export const writeRunState = (state) => writeSecretJson(runFile, state);

/**
 * One launcher to a clone: two would start two servers on one data folder.
 * @returns {() => void} gives the place up again
 */
export function takeLauncherPlace() {
	const own = `${lockFile}.${process.pid}`;
	writeFileSync(own, JSON.stringify(markOf(process.pid)), { mode: 0o600 });
	try {
		// A link appears with its content or not at all, so nobody reads an empty lock.
		for (let attempt = 1; ; attempt++) {
			try {
				linkSync(own, lockFile);
				return () => rmSync(lockFile, { force: true });
			} catch (error) {
				if (codeOf(error) !== 'EEXIST' || attempt > 3) throw error;
				const holder = /** @type {Mark | null} */ (readJson(lockFile));
				if (holder && isAlive(holder)) throw new Mendable(whoRuns(holder));
				rmSync(lockFile, { force: true });
			}
		}
	} finally {
		rmSync(own, { force: true });
	}
}

/** @param {Mark} holder */
function whoRuns(holder) {
	const state = livingRunState();
	return state?.ready
		? `Trunnion runs already at ${state.address} (process ${holder.pid}). Stop it with Ctrl-C where it was started, or: kill ${holder.pid}`
		: `Trunnion is being started or stopped already by process ${holder.pid}. Wait for it, or end it: kill ${holder.pid}`;
}

/** Ends exactly the processes that a killed launcher left behind. */
export async function endLeftovers() {
	const state = readRunState();
	if (!state) return;
	// The database last, as in any stop: the others may still be writing to it.
	const left = Object.entries(state.processes).filter(([, mark]) => isAlive(mark));
	const last = left.filter(([name]) => name === 'database');
	const first = left.filter(([name]) => name !== 'database');
	if (left.length)
		console.error(`Ending what a killed start left behind: ${left.map(([name]) => name).join(', ')}.`);
	await Promise.all(first.map(([, mark]) => endProcess(mark, 'SIGTERM', 5_000)));
	await Promise.all(last.map(([, mark]) => endProcess(mark, 'SIGINT', 15_000)));
}

export const forgetRunState = () => rmSync(runFile, { force: true });

/** @param {string} file */
export const readText = (file) => {
	try {
		return readFileSync(file, 'utf8');
	} catch (error) {
		if (codeOf(error) === 'ENOENT') return null;
		throw error;
	}
};
