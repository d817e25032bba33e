import { spawn, type ChildProcess } from 'node:child_process';
import { chmodSync, cpSync, mkdtempSync, readFileSync, readdirSync, rmSync, symlinkSync } from 'node:fs';
import path from 'node:path';
import { afterAll, afterEach, beforeAll } from 'vitest';
import { root } from '../../src/local/place.js';
import type { Mark } from '../../src/local/processes.js';

/** A launcher at work: what it says, and how it ended. */
export interface Launched {
	child: ChildProcess;
	pid: number;
	output: () => string;
	/** Settles when `text` was said; fails when it ends before. */
	saying(text: string): Promise<void>;
	ended: Promise<number | null>;
}

interface RunState {
	launcher: { pid: number };
	ready: boolean;
	address: string;
	mailPage: string;
	processes: Record<string, Mark>;
	env: Record<string, string>;
}

/** A copy of this clone in a folder of its own, so that its `.local` is nobody else's. */
export function useCopy() {
	let folder = '';
	const launched: Launched[] = [];
	beforeAll(() => {
		folder = mkdtempSync('/var/tmp/trunnion-test-copy-');
		chmodSync(folder, 0o755);
		for (const name of [
			'src',
			'migrations',
			'static',
			'docker',
			'package.json',
			'package-lock.json',
			'.npmrc'
		])
			cpSync(path.join(root, name), path.join(folder, name), { recursive: true });
		for (const name of ['svelte.config.js', 'tailwind.config.ts', 'tsconfig.json', 'vite.config.ts'])
			cpSync(path.join(root, name), path.join(folder, name));
		cpSync(path.join(root, '.svelte-kit/tsconfig.json'), path.join(folder, '.svelte-kit/tsconfig.json'));
		cpSync(path.join(root, 'build'), path.join(folder, 'build'), { recursive: true });
		// The launcher installs nothing through a link; it only has to find that the packages are those of the lockfile.
		symlinkSync(path.join(root, 'node_modules'), path.join(folder, 'node_modules'));
	});
	// A failed test must not leave its launcher to the next one.
	afterEach(async () => {
		for (const one of launched.splice(0)) {
			one.child.kill('SIGTERM');
			await one.ended;
		}
	});
	afterAll(() => rmSync(folder, { recursive: true, force: true }));
	return {
		get folder() {
			return folder;
		},
		run(command: string[], env: Record<string, string> = {}): Launched {
			const one = launch(folder, command, env);
			launched.push(one);
			return one;
		},
		state: () => JSON.parse(readFileSync(path.join(folder, '.local/run.json'), 'utf8')) as RunState
	};
}

function launch(cwd: string, command: string[], extra: Record<string, string>): Launched {
	const env = { PATH: process.env.PATH, HOME: process.env.HOME, TRUNNION_DEMO: 'off', ...extra };
	const child = spawn(command[0]!, command.slice(1), { cwd, env, stdio: ['pipe', 'pipe', 'pipe'] });
	let output = '';
	const listeners = new Set<() => void>();
	for (const stream of [child.stdout, child.stderr])
		stream.on('data', (chunk) => {
			output += String(chunk);
			for (const listener of listeners) listener();
		});
	const ended = new Promise<number | null>((resolve) => child.on('close', (code) => resolve(code)));
	return {
		child,
		pid: child.pid ?? 0,
		output: () => output,
		ended,
		saying: (text) =>
			new Promise((resolve, reject) => {
				const look = () => {
					if (output.includes(text)) resolve();
				};
				listeners.add(look);
				look();
				void ended.then((code) =>
					reject(new Error(`ended with ${code} before saying "${text}":\n${output}`))
				);
			})
	};
}

/** Processes whose command line names this folder, apart from those that only look. */
export function processesIn(folder: string): string[] {
	return readdirSync('/proc')
		.filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
		.map((pid) => {
			try {
				const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ').trim();
				const state = readFileSync(`/proc/${pid}/stat`, 'utf8');
				return command.includes(folder) && !/\) [ZX] /.test(state) ? `${pid} ${command}` : '';
			} catch {
				return '';
			}
		})
		.filter(Boolean);
}
