import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
	existsSync,
	lstatSync,
	readFileSync,
	readdirSync,
	realpathSync,
	rmSync,
	writeFileSync
} from 'node:fs';
import path from 'node:path';
import { readText } from './launcher-state.js';
import { Mendable, localFolder, root } from './place.js';
import { endingWithUs } from './processes.js';

/** What must be there before anything of the application can run: a fitting Node.js, the packages, the built web server. */

export function checkNode() {
	const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
	if ((major === 20 && minor >= 20) || major >= 22) return;
	throw new Mendable(
		`Node.js ${process.versions.node} is too old or an odd release: install Node.js 20.20 or newer of the 20 line, or 22 and up.`
	);
}

/**
 * Runs a command to its end, or to ours.
 * @param {string[]} command
 * @param {NodeJS.ProcessEnv} [env]
 * @returns {Promise<{ code: number | null, output: string }>}
 */
export function runToEnd(command, env = process.env) {
	return new Promise((resolve, reject) => {
		const [file = '', ...args] = endingWithUs(command, 'KILL');
		const child = spawn(file, args, {
			cwd: root,
			env,
			stdio: ['ignore', 'pipe', 'pipe']
		});
		let output = '';
		for (const stream of [child.stdout, child.stderr])
			stream.on('data', (chunk) => (output += String(chunk)));
		child.on('error', reject);
		child.on('close', (code) => resolve({ code, output }));
	});
}

/** @param {string} name of a package's program */
export const program = (name) => path.join(root, 'node_modules', '.bin', name);

/** @returns {string} a hash of the lockfile */
export const packagesHash = () =>
	createHash('sha256')
		.update(readFileSync(path.join(root, 'package-lock.json')))
		.digest('hex');

/** Installs the packages when they are missing or the lockfile is another than the one they were installed by. */
export async function ensurePackages() {
	const lockHash = packagesHash();
	const mark = path.join(localFolder, 'packages.sha256');
	const installed = path.join(root, 'node_modules', '.package-lock.json');
	// Packages that someone installed by hand count too, when they are those of the lockfile.
	if (existsSync(installed) && (readText(mark) === lockHash || isSameTree(installed))) {
		writeFileSync(mark, lockHash);
		return;
	}
	const folder = path.join(root, 'node_modules');
	// npm would empty the folder that the link leads to, which is another clone's.
	if (lstatSync(folder, { throwIfNoEntry: false })?.isSymbolicLink())
		throw new Mendable(
			`The packages in ${realpathSync(folder)} are not those of this clone's lockfile, and ${folder} is only a link to them. ` +
				'Remove the link, or run npm ci where it leads.'
		);
	console.error('Installing packages …');
	rmSync(mark, { force: true });
	const { code, output } = await runToEnd([
		'npm',
		'ci',
		'--include=dev',
		'--loglevel=error',
		'--no-progress'
	]);
	if (code !== 0) {
		throw new Mendable(
			`The packages could not be installed (npm ci ended with code ${code}); mend that and start again. It said:\n${output.trim()}`
		);
	}
	writeFileSync(mark, lockHash);
}

/**
 * npm writes down what it installed; every package of the lockfile that this machine needs must be in it, in its version.
 * @param {string} installedFile
 */
function isSameTree(installedFile) {
	/** @typedef {{ packages?: Record<string, { version?: string, optional?: boolean }> }} Lock */
	const wanted =
		/** @type {Lock} */ (JSON.parse(readFileSync(path.join(root, 'package-lock.json'), 'utf8'))).packages ??
		{};
	const there = /** @type {Lock} */ (JSON.parse(readFileSync(installedFile, 'utf8'))).packages ?? {};
	return Object.entries(wanted).every(
		([name, one]) => name === '' || one.optional || there[name]?.version === one.version
	);
}

/** What the built web server is made of. */
const SOURCES = [
	'src',
	'static',
	'package-lock.json',
	'svelte.config.js',
	'tailwind.config.ts',
	'tsconfig.json',
	'vite.config.ts'
];

/** @returns {string} a hash over names and contents of all sources */
function sourceHash() {
	const hash = createHash('sha256').update(process.versions.node.split('.')[0] ?? '');
	for (const source of SOURCES) {
		const at = path.join(root, source);
		if (!existsSync(at)) continue;
		const below = source.includes('.') ? [''] : readdirSync(at, { recursive: true, encoding: 'utf8' }).sort();
		for (const name of below) {
			if (source === 'src' && (name.startsWith('local') || name.endsWith('.test.ts'))) continue;
			const file = path.join(at, name);
			try {
				const content = readFileSync(file);
				hash.update(`${source}/${name}\0${content.length}\0`).update(content);
			} catch (error) {
				if (!(error instanceof Error && 'code' in error && error.code === 'EISDIR')) throw error;
			}
		}
	}
	return hash.digest('hex');
}

/**
 * Builds the web server unless the one that is there was built from these very sources.
 * @returns {Promise<boolean>} whether it was built now
 */
export async function ensureBuild() {
	const mark = path.join(root, 'build', '.sources.sha256');
	const wanted = sourceHash();
	if (existsSync(path.join(root, 'build', 'index.js')) && readText(mark) === wanted) return false;
	console.error('Building the web server …');
	rmSync(mark, { force: true });
	const { code, output } = await runToEnd([program('vite'), 'build', '--logLevel', 'warn'], {
		...process.env,
		NODE_ENV: 'production'
	});
	if (code !== 0)
		throw new Mendable(
			`The web server could not be built (vite build ended with code ${code}):\n${output.trim()}`
		);
	writeFileSync(mark, wanted);
	return true;
}
