import { spawn } from 'node:child_process';
import { closeSync, existsSync, openSync, readFileSync, renameSync, statSync } from 'node:fs';
import { createServer } from 'node:net';
import { setTimeout as sleep } from 'node:timers/promises';
import { codeOf } from './place.js';

/**
 * A process that was started here. `started` is the kernel's start time: with it a number that was given to
 * another process since is never taken for ours.
 * @typedef {{ pid: number, started: string }} Mark
 * @typedef {Mark & { name: string, child: import('node:child_process').ChildProcess, log: string,
 *   gone: Promise<string> }} Running `gone` settles with how it ended.
 */

/**
 * The kernel's start time of a process in clock ticks, or null when there is no such process (or only a zombie).
 * @param {number} pid
 */
function startTimeOf(pid) {
	try {
		const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
		// The name in brackets may hold spaces and brackets itself: count from the last one.
		const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
		return fields[0] === 'Z' || fields[0] === 'X' ? null : (fields[19] ?? null);
	} catch {
		return null;
	}
}

/**
 * @param {number} pid
 * @returns {Mark}
 */
export const markOf = (pid) => ({ pid, started: startTimeOf(pid) ?? '' });

/** @param {Mark} mark */
export const isAlive = (mark) => mark.started !== '' && startTimeOf(mark.pid) === mark.started;

/**
 * Ends exactly this process: the signal first, SIGKILL when it is still there after `patienceMs`.
 * @param {Mark} mark
 * @param {NodeJS.Signals} signal
 * @param {number} patienceMs
 */
export async function endProcess(mark, signal, patienceMs) {
	const until = performance.now() + patienceMs;
	/** @type {NodeJS.Signals} */
	let next = signal;
	while (isAlive(mark)) {
		try {
			process.kill(mark.pid, next);
		} catch {
			return; // it went in between
		}
		while (isAlive(mark) && performance.now() < until) await sleep(20);
		if (next === 'SIGKILL') await sleep(20);
		next = 'SIGKILL';
	}
}

/**
 * A command line whose process the kernel ends when this one is gone, however it went; run as another user where one is given.
 * @param {string[]} command
 * @param {'TERM' | 'INT' | 'KILL'} signal
 * @param {{ uid: number, gid: number } | null} [user]
 */
export function endingWithUs(command, signal, user = null) {
	const prefix = ['setpriv', '--pdeathsig', signal];
	if (user) prefix.push(`--reuid=${user.uid}`, `--regid=${user.gid}`, '--init-groups');
	return [...prefix, ...command];
}

/**
 * Starts a long-running process with its output in a log file. It stands in its own process group, so that Ctrl-C reaches
 * the launcher alone and the order of stopping is ours; the kernel ends it when the launcher is killed outright.
 * @param {string} name
 * @param {string[]} command
 * @param {{ env: NodeJS.ProcessEnv, log: string, cwd: string, lastSignal?: 'TERM' | 'INT',
 *   user?: { uid: number, gid: number } | null, ipc?: boolean }} options
 * @returns {Running}
 */
export function startProcess(name, command, options) {
	const { env, log, cwd, lastSignal = 'TERM', user = null, ipc = false } = options;
	const line = endingWithUs(command, lastSignal, user);
	if (existsSync(log) && statSync(log).size > 10_000_000) renameSync(log, `${log}.1`);
	const out = openSync(log, 'a', 0o600);
	const child = spawn(line[0] ?? '', line.slice(1), {
		cwd,
		env,
		detached: true,
		stdio: ipc ? ['ignore', out, out, 'ipc'] : ['ignore', out, out]
	});
	closeSync(out);
	const gone = new Promise((/** @type {(how: string) => void} */ resolve) => {
		child.on('error', (error) => resolve(`could not be started: ${error.message}`));
		child.on('exit', (code, signal) =>
			resolve(signal ? `was ended by ${signal}` : `ended with code ${code}`)
		);
	});
	return { name, child, log, gone, ...markOf(child.pid ?? 0) };
}

/**
 * The first message that a process started with `ipc` sends: where it listens.
 * @param {Running} running
 * @returns {Promise<Record<string, unknown>>}
 */
export function firstMessage(running) {
	return Promise.race([
		new Promise((/** @type {(message: Record<string, unknown>) => void} */ resolve) =>
			running.child.once('message', (message) => resolve(/** @type {Record<string, unknown>} */ (message)))
		),
		running.gone.then((how) => {
			throw new Error(`${running.name} ${how}: ${lastLines(running.log, 5)}`);
		})
	]);
}

/**
 * @param {string} file
 * @param {number} count
 */
export function lastLines(file, count) {
	try {
		return readFileSync(file, 'utf8').trimEnd().split('\n').slice(-count).join('\n');
	} catch {
		return '';
	}
}

/**
 * What stands against listening on this address now: a system error's code, or null.
 * @param {string} host
 * @param {number} port
 * @returns {Promise<string | null>}
 */
export function portTrouble(host, port) {
	return new Promise((resolve) => {
		const probe = createServer();
		probe.once('error', (error) => resolve(codeOf(error)));
		probe.listen({ host, port, exclusive: true }, () => probe.close(() => resolve(null)));
	});
}

/** @returns {Promise<number>} a loopback port that nothing listens on at this moment */
export function freePort() {
	return new Promise((resolve, reject) => {
		const probe = createServer();
		probe.once('error', reject);
		probe.listen({ host: '127.0.0.1', port: 0 }, () => {
			const address = probe.address();
			const port = typeof address === 'object' && address ? address.port : 0;
			probe.close(() => resolve(port));
		});
	});
}

/**
 * Calls back when npm, under which this process was started, is gone: nobody is left then who could stop it.
 * @param {() => void} orphaned
 */
export function whenNpmIsGone(orphaned) {
	if (!process.env.npm_lifecycle_event) return;
	const parent = process.ppid;
	const timer = setInterval(() => {
		if (process.ppid === parent) return;
		clearInterval(timer);
		orphaned();
	}, 500);
	timer.unref();
}
