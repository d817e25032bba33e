import { randomBytes } from 'node:crypto';
import { existsSync } from 'node:fs';
import path from 'node:path';
import { startCluster } from './cluster.js';
import {
	databaseSettings,
	hasOwnDatabase,
	hasOwnMail,
	hasOwnStore,
	localDatabaseSettings,
	otherSettings,
	surroundings
} from './environment.js';
import { Mendable, makeFolder, root } from './place.js';
import { endProcess, firstMessage, isPortFree, startProcess } from './processes.js';

/**
 * The services that the application needs and this machine does not have: each is started only if nothing is set for it.
 * @typedef {import('./processes.js').Running} Running
 * @typedef {{ cluster: import('./cluster.js').Cluster | null, mailPage: string | null, env: Record<string, string>,
 *   running: Running[], stop: () => Promise<void> }} Services
 */

/**
 * @param {string} home where everything is kept
 * @param {NodeJS.ProcessEnv} given
 * @param {{ throwAway?: boolean, pagePort?: number, onStart?: (running: Running) => void }} [options]
 * @returns {Promise<Services>}
 */
export async function startServices(home, given, { throwAway = false, pagePort = 0, onStart } = {}) {
	const logs = path.join(home, 'log');
	makeFolder(home);
	makeFolder(logs);
	/** @type {Services} */
	const services = {
		cluster: null,
		mailPage: null,
		env: { ...surroundings(given), ...otherSettings(given) },
		running: [],
		stop: async () => {
			await Promise.all(services.running.map((one) => endProcess(one, 'SIGTERM', 3_000)));
			await services.cluster?.stop();
		}
	};
	const started = (/** @type {Running} */ one) => {
		if (one.name !== 'database') services.running.push(one);
		onStart?.(one);
	};
	try {
		await Promise.all([
			startDatabase(services, home, given, throwAway, started),
			startStore(services, home, given, throwAway, started),
			startMail(services, home, given, pagePort, started)
		]);
	} catch (error) {
		await services.stop();
		throw error;
	}
	return services;
}

/** @typedef {(running: Running) => void} Started */

/**
 * @param {Services} services
 * @param {string} home
 * @param {NodeJS.ProcessEnv} given
 * @param {boolean} throwAway
 * @param {Started} started
 */
async function startDatabase(services, home, given, throwAway, started) {
	if (hasOwnDatabase(given)) {
		Object.assign(services.env, databaseSettings(given));
		return;
	}
	services.cluster = await startCluster(home, { log: path.join(home, 'log', 'database.log'), throwAway });
	started(services.cluster.running);
	Object.assign(services.env, localDatabaseSettings(services.cluster.urls('trunnion')));
}

/**
 * @param {Services} services
 * @param {string} home
 * @param {NodeJS.ProcessEnv} given
 * @param {boolean} throwAway
 * @param {Started} started
 */
async function startStore(services, home, given, throwAway, started) {
	if (hasOwnStore(given)) {
		if (!given.S3_BUCKET) throw new Mendable('S3_ENDPOINT is set without S3_BUCKET: name the bucket too.');
		return;
	}
	const keys = {
		S3_ACCESS_KEY_ID: randomBytes(16).toString('hex'),
		S3_SECRET_ACCESS_KEY: randomBytes(24).toString('hex')
	};
	const command = [
		process.execPath,
		local('object-store.js'),
		'--folder',
		path.join(home, 'objects'),
		'--bucket',
		'trunnion'
	];
	if (throwAway) command.push('--throw-away');
	const running = startProcess('object store', command, {
		env: { ...services.env, ...keys },
		cwd: root,
		log: path.join(home, 'log', 'object-store.log'),
		ipc: true
	});
	started(running);
	const { port } = await firstMessage(running);
	Object.assign(services.env, keys, {
		S3_ENDPOINT: `http://127.0.0.1:${port}`,
		S3_BUCKET: 'trunnion',
		S3_REGION: 'local'
	});
}

/**
 * @param {Services} services
 * @param {string} home
 * @param {NodeJS.ProcessEnv} given
 * @param {number} pagePort
 * @param {Started} started
 */
async function startMail(services, home, given, pagePort, started) {
	if (hasOwnMail(given)) return;
	const { running, smtpPort, page } = await startMailCatcher(
		path.join(home, 'mail'),
		path.join(home, 'log', 'mail.log'),
		services.env,
		pagePort
	);
	started(running);
	services.env.SMTP_URL = `smtp://127.0.0.1:${smtpPort}`;
	services.mailPage = page;
}

/**
 * @param {string} folder
 * @param {string} log
 * @param {NodeJS.ProcessEnv} env
 * @param {number} pagePort the wished port of its page; any other when that is taken
 */
export async function startMailCatcher(folder, log, env, pagePort = 0) {
	const wished = pagePort > 0 && (await isPortFree('127.0.0.1', pagePort)) ? pagePort : 0;
	const command = [
		process.execPath,
		local('mail-catcher.js'),
		'--folder',
		folder,
		'--page-port',
		String(wished)
	];
	const running = startProcess('mail catcher', command, { env, cwd: root, log, ipc: true });
	const { smtpPort, pagePort: port } = await firstMessage(running);
	return { running, smtpPort: Number(smtpPort), page: `http://127.0.0.1:${port}` };
}

/** @param {string} file */
function local(file) {
	const at = path.join(root, 'src', 'local', file);
	if (!existsSync(at)) throw new Error(`${at} is missing`);
	return at;
}
