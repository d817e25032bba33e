import { randomBytes } from 'node:crypto';
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
import { endProcess, firstMessage, portTrouble, startProcess } from './processes.js';

/**
 * The services that the application needs and this machine does not have: each is started only if nothing is set for it.
 * @typedef {import('./processes.js').Running} Running
 * @typedef {{ cluster: import('./cluster.js').Cluster | null, mailPage: string | null, env: Record<string, string> }} Services
 * @typedef {{ home: string, given: NodeJS.ProcessEnv, throwAway: boolean, pagePort: number,
 *   onStart: (running: Running) => void }} Wishes `home`: where everything is kept; `onStart` hears of each process at once,
 *   so that a start that breaks off half-way leaves none behind
 */

const DATABASE = 'database';

/**
 * @param {Wishes} wishes
 * @returns {Promise<Services>}
 */
export async function startServices(wishes) {
	makeFolder(wishes.home);
	makeFolder(path.join(wishes.home, 'log'));
	/** @type {Services} */
	const services = {
		cluster: null,
		mailPage: null,
		env: { ...surroundings(wishes.given), ...otherSettings(wishes.given) }
	};
	const outcomes = await Promise.allSettled([
		startDatabase(services, wishes),
		startStore(services, wishes),
		startMail(services, wishes)
	]);
	for (const outcome of outcomes) if (outcome.status === 'rejected') throw outcome.reason;
	return services;
}

/**
 * Ends services: the database last, since the others may still be at work for someone who uses it.
 * @param {Running[]} running
 */
export async function stopServices(running) {
	const [databases, others] = [true, false].map((is) =>
		running.filter((one) => (one.name === DATABASE) === is)
	);
	await Promise.all((others ?? []).map((one) => endProcess(one, 'SIGTERM', 3_000)));
	await Promise.all((databases ?? []).map((one) => endProcess(one, 'SIGINT', 20_000)));
}

/**
 * @param {string} home
 * @param {string} name
 */
const logOf = (home, name) => path.join(home, 'log', `${name}.log`);

/**
 * @param {Services} services
 * @param {Wishes} wishes
 */
async function startDatabase(services, { home, given, throwAway, onStart }) {
	if (hasOwnDatabase(given)) {
		Object.assign(services.env, databaseSettings(given));
		return;
	}
	services.cluster = await startCluster(home, {
		name: DATABASE,
		log: logOf(home, DATABASE),
		throwAway,
		onStart
	});
	Object.assign(services.env, localDatabaseSettings(services.cluster.urls('trunnion')));
}

/**
 * @param {Services} services
 * @param {Wishes} wishes
 */
async function startStore(services, { home, given, throwAway, onStart }) {
	if (hasOwnStore(given)) {
		if (!given.S3_BUCKET) throw new Mendable('S3_ENDPOINT is set without S3_BUCKET: name the bucket too.');
		return;
	}
	const keys = {
		S3_ACCESS_KEY_ID: randomBytes(16).toString('hex'),
		S3_SECRET_ACCESS_KEY: randomBytes(24).toString('hex')
	};
	const command = [process.execPath, path.join(root, 'src/local/object-store.js')];
	command.push('--folder', path.join(home, 'objects'), '--bucket', 'trunnion');
	if (throwAway) command.push('--throw-away');
	const running = startProcess('object store', command, {
		env: { ...services.env, ...keys },
		cwd: root,
		log: logOf(home, 'object-store'),
		ipc: true
	});
	onStart(running);
	const { port } = await firstMessage(running);
	Object.assign(services.env, keys, {
		S3_ENDPOINT: `http://127.0.0.1:${port}`,
		S3_BUCKET: 'trunnion',
		S3_REGION: 'local'
	});
}

/**
 * @param {Services} services
 * @param {Wishes} wishes
 */
async function startMail(services, { home, given, pagePort, onStart }) {
	if (hasOwnMail(given)) return;
	const wished = pagePort > 0 && (await portTrouble('127.0.0.1', pagePort)) === null ? pagePort : 0;
	const log = logOf(home, 'mail-catcher');
	const mail = await startMailCatcher(path.join(home, 'mail'), log, services.env, wished, onStart);
	services.env.SMTP_URL = mail.smtpUrl;
	services.mailPage = mail.page;
}

/**
 * @param {string} folder where the mails are kept
 * @param {string} log
 * @param {NodeJS.ProcessEnv} env
 * @param {number} [pagePort]
 * @param {(running: Running) => void} [onStart]
 */
export async function startMailCatcher(folder, log, env, pagePort = 0, onStart = () => {}) {
	const command = [process.execPath, path.join(root, 'src/local/mail-catcher.js')];
	command.push('--folder', folder, '--page-port', String(pagePort));
	const running = startProcess('mail catcher', command, { env, cwd: root, log, ipc: true });
	onStart(running);
	const { smtpPort, pagePort: port } = await firstMessage(running);
	return { running, smtpUrl: `smtp://127.0.0.1:${smtpPort}`, page: `http://127.0.0.1:${port}` };
}
