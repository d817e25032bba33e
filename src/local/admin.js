import { spawn } from 'node:child_process';
import { constants } from 'node:os';
import { clusterExists } from './cluster-folder.js';
import { databaseSettings, hasOwnDatabase, otherSettings, surroundings } from './environment.js';
import { endLeftovers, forgetRunState, livingRunState, takeLauncherPlace } from './launcher-state.js';
import { Mendable, localFolder, makeFolder, root } from './place.js';
import { checkNode, ensurePackages } from './prepare.js';
import { startServices, stopServices } from './services.js';

/**
 * `npm run admin -- …`: the operators' commands, with the addresses of what runs here. Standard output is the command's
 * own and nothing else's, so that a token can be caught in a variable.
 */

/** @param {NodeJS.ProcessEnv} env */
function runCommand(env) {
	const command = ['--import', 'tsx', 'src/admin.ts', ...process.argv.slice(2)];
	return new Promise((/** @type {(code: number) => void} */ resolve, reject) => {
		const child = spawn(process.execPath, command, { cwd: root, env, stdio: 'inherit' });
		child.on('error', reject);
		child.on('exit', (code, signal) => resolve(code ?? 128 + (signal ? constants.signals[signal] : 0)));
		// Ctrl-C reaches the command itself, which may finish its transaction; a kill is passed on.
		process.on('SIGINT', () => {});
		process.on('SIGTERM', () => child.kill('SIGTERM'));
	});
}

/** With the services brought up for this one command. */
async function runAlone() {
	makeFolder(localFolder);
	const giveUpPlace = takeLauncherPlace();
	/** @type {import('./processes.js').Running[]} */
	const running = [];
	try {
		await endLeftovers();
		const services = await startServices({
			home: localFolder,
			given: process.env,
			throwAway: false,
			pagePort: 0,
			onStart: (one) => void running.push(one)
		});
		return await runCommand(withOwn(services.env));
	} finally {
		await stopServices(running);
		forgetRunState();
		giveUpPlace();
	}
}

/**
 * The command may be given a password by the environment.
 * @param {Record<string, string>} env
 */
const withOwn = (env) => ({ ...surroundings(process.env), ...env });

async function main() {
	checkNode();
	makeFolder(localFolder);
	await ensurePackages();
	if (hasOwnDatabase(process.env))
		return runCommand({
			...surroundings(process.env),
			...otherSettings(process.env),
			...databaseSettings(process.env)
		});
	const state = livingRunState();
	if (state && Object.keys(state.env).length > 0) return runCommand(withOwn(state.env));
	if (state) throw new Mendable('Trunnion is being started; try again when it runs.');
	if (clusterExists(localFolder)) return runAlone();
	throw new Mendable(
		'Nothing runs here and there is no database yet: run npm start first, or set DATABASE_URL and the other settings of a running one.'
	);
}

main().then(
	(code) => (process.exitCode = code),
	(error) => {
		console.error(error instanceof Mendable ? error.message : error);
		process.exitCode = 1;
	}
);
