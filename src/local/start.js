import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { DEMO_CLIENTS, DEMO_PASSWORD, DEMO_STAFF, wantsDemo } from './demo.js';
import { webSettings } from './environment.js';
import { endLeftovers, forgetRunState, takeLauncherPlace, writeRunState } from './launcher-state.js';
import { watchForErrors, watchLines } from './log-watch.js';
import { migrate } from './migration.js';
import { Mendable, localFolder, makeFolder, root, textOf } from './place.js';
import { checkNode, ensureBuild, ensurePackages } from './prepare.js';
import {
	endProcess,
	isAlive,
	lastLines,
	markOf,
	portTrouble,
	startProcess,
	whenNpmIsGone
} from './processes.js';
import { startServices, stopServices } from './services.js';

/**
 * `npm start`: everything from a fresh clone to a page to sign in on, and the orderly end of all of it on Ctrl-C.
 * `--services-only` leaves out the application itself, for work on it.
 *
 * @typedef {import('./processes.js').Running} Running
 */

const servicesOnly = process.argv.includes('--services-only');
const web = webSettings(process.env);

/** @type {Running[]} the application's own processes, in the order of their starting */
const own = [];
/** @type {Running[]} */
const serviceProcesses = [];
/** @type {(() => void) | null} set while this clone is ours */
let giveUpPlace = null;
/** @type {Promise<void> | null} */
let stopping = null;

/** @type {import('./launcher-state.js').RunState} */
const state = {
	launcher: markOf(process.pid),
	ready: false,
	address: web.ORIGIN,
	mailPage: null,
	processes: {},
	env: {}
};

/** @param {Running} one */
function remember(one) {
	state.processes[one.name] = { pid: one.pid, started: one.started };
	writeRunState(state);
}

/**
 * A part that all need: when it ends by itself, so does everything.
 * @param {Running} one
 */
function watch(one) {
	// An attempt that was followed by a better one, as when the database's port was taken at the last moment, is no loss.
	if (state.processes[one.name]?.pid !== one.pid) return;
	void one.gone.then((how) => {
		if (stopping) return;
		console.error(
			`The ${one.name} ${how}; stopping the rest. Its log ${one.log} ends with:\n${lastLines(one.log, 8)}`
		);
		void stop(1);
	});
}

/**
 * @param {string} name
 * @param {string[]} args
 * @param {Record<string, string>} env
 */
function startOwn(name, args, env) {
	const log = path.join(localFolder, 'log', `${name.replaceAll(' ', '-')}.log`);
	const one = startProcess(name, [process.execPath, ...args], { env, cwd: root, log });
	own.push(one);
	remember(one);
	watchForErrors(name, log);
	return one;
}

/** @param {number} code */
function stop(code) {
	stopping ??= (async () => {
		if (!giveUpPlace) process.exit(code);
		if (own.length + serviceProcesses.length) console.log('Stopping …');
		// Whoever uses the services goes first, and may finish what it is at.
		await Promise.all(own.map((one) => endProcess(one, 'SIGTERM', 12_000)));
		await stopServices(serviceProcesses);
		forgetRunState();
		giveUpPlace();
		if (own.length + serviceProcesses.length) console.log('Stopped.');
		process.exit(code);
	})();
	return stopping;
}

/** A second Ctrl-C does not wait for requests and jobs; the database still ends in order. */
function stopAtOnce() {
	for (const one of own) if (isAlive(one)) process.kill(one.pid, 'SIGKILL');
}

const ANSWER_MS = 120_000;
const ALL_WELL_MS = 20_000;

/** Until the web server answers and all that it needs does too; what is someone else's to mend only gets a word. */
async function waitForHealth() {
	const host = ['0.0.0.0', '::'].includes(web.HOST) ? '127.0.0.1' : web.HOST;
	const at = `http://${host.includes(':') ? `[${host}]` : host}:${web.PORT}/api/v1/health`;
	let said = 'no answer';
	let until = performance.now() + ANSWER_MS;
	let answered = false;
	for (; performance.now() < until && !stopping; await sleep(100)) {
		try {
			const response = await fetch(at, { signal: AbortSignal.timeout(5_000) });
			said = await response.text();
			if (response.status !== 200) continue;
			if (JSON.parse(said).status === 'ok') return;
			if (!answered) until = performance.now() + ALL_WELL_MS;
			answered = true;
		} catch (error) {
			said = textOf(error);
		}
	}
	if (stopping) return;
	if (answered) console.error(`The web server answers, but not all is well: ${said}`);
	else
		throw new Mendable(
			`The web server did not become healthy in two minutes (${said}). Its logs are in ${localFolder}/log.`
		);
}

/** @param {import('./cluster.js').Cluster} cluster */
function startSeed(cluster) {
	const seed = startOwn('demo seed', ['--import', 'tsx', 'src/seed.ts'], state.env);
	console.log('The demo laboratory is being filled in; its runs appear over the next minutes.');
	const endProgress = watchLines(seed.log, (line) => {
		if (/^Demo lab: \d+ of \d+ traces sent$/.test(line)) console.log(line);
	});
	void seed.gone.then((how) => {
		endProgress();
		own.splice(own.indexOf(seed), 1);
		if (stopping) return;
		if (how === 'ended with code 0') {
			cluster.remember({ seeded: true });
			console.log('The demo laboratory is complete.');
		} else
			console.error(
				`The demo seed ${how}; the next start goes on with it. Its log ${seed.log} ends with:\n${lastLines(seed.log, 5)}`
			);
	});
}

/** @param {import('./cluster.js').Cluster | null} cluster null: someone else's database, which gets no demo */
async function startApplication(cluster) {
	const env = { ...state.env, ...web };
	await migrate(cluster, env);
	if (stopping) return;
	if (cluster && !cluster.kept.seeded && wantsDemo(process.env)) startSeed(cluster);
	watch(startOwn('worker', ['--import', 'tsx', 'src/worker.ts'], env));
	watch(startOwn('web server', ['build/index.js'], env));
	await waitForHealth();
}

/** @param {boolean} isDemo */
function greet(isDemo) {
	const lines = [`Trunnion runs at ${web.ORIGIN}`];
	if (isDemo)
		lines.push(
			`Demo sign-ins, all with the password "${DEMO_PASSWORD}":`,
			`  staff      ${DEMO_STAFF.join(' ')}`,
			`  clients    ${DEMO_CLIENTS.join(' ')}`
		);
	if (state.mailPage) lines.push(`Mail that it sends is caught and shown at ${state.mailPage}`);
	lines.push('Ctrl-C stops everything.');
	console.log(`\n${lines.join('\n')}\n`);
}

async function checkPort() {
	const port = Number(web.PORT);
	if (!Number.isInteger(port) || port < 1 || port > 65_534)
		throw new Mendable(`PORT must be a whole number from 1 to 65534, not "${web.PORT}".`);
	const trouble = await portTrouble(web.HOST, port);
	const another = `choose another port: PORT=${port < 60_000 ? port + 2 : 5180} npm start`;
	if (trouble === 'EADDRINUSE')
		throw new Mendable(`Port ${port} on ${web.HOST} is in use by another program. End that, or ${another}`);
	if (trouble === 'EACCES') throw new Mendable(`This user may not listen on port ${port}; ${another}`);
	if (trouble)
		throw new Mendable(`HOST=${web.HOST} is no address of this machine (${trouble}); leave HOST away.`);
}

async function main() {
	const began = performance.now();
	checkNode();
	makeFolder(localFolder);
	giveUpPlace = takeLauncherPlace();
	await endLeftovers();
	if (!servicesOnly) await checkPort();
	await ensurePackages();
	if (stopping) return;
	const [services] = await Promise.all([
		startServices({
			home: localFolder,
			given: process.env,
			throwAway: false,
			pagePort: Number(web.PORT) + 1,
			onStart: (one) => {
				serviceProcesses.push(one);
				remember(one);
			}
		}),
		servicesOnly || ensureBuild()
	]);
	serviceProcesses.forEach(watch);
	Object.assign(state, { mailPage: services.mailPage, env: { ...services.env, ...web } });
	writeRunState(state);
	if (stopping) return;
	if (!servicesOnly) await startApplication(services.cluster);
	if (stopping) return;
	state.ready = true;
	writeRunState(state);
	if (servicesOnly)
		console.log(`Services run; their addresses are in ${localFolder}/run.json. Ctrl-C stops them.`);
	else greet(services.cluster !== null && wantsDemo(process.env));
	console.log(`Started in ${((performance.now() - began) / 1000).toFixed(1)} s.`);
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP']))
	process.on(signal, () => {
		if (stopping) stopAtOnce();
		else void stop(signal === 'SIGINT' ? 130 : 143);
	});
whenNpmIsGone(() => {
	if (!stopping) void stop(143);
});
// The terminal may go before the launcher does.
for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});

main().catch(async (error) => {
	if (stopping) return;
	console.error(error instanceof Mendable ? error.message : error);
	await stop(1);
});
