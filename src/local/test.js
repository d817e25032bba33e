import path from 'node:path';
import { parseArgs } from 'node:util';
import { chromium } from './debian.js';
import { migrate } from './migration.js';
import { Mendable, localFolder, makeFolder, textOf } from './place.js';
import { checkNode, ensureBuild, ensurePackages, program, runToEnd } from './prepare.js';
import { whenNpmIsGone } from './processes.js';
import { startServices, stopServices } from './services.js';
import { makeTestFolder } from './test-folder.js';
import { CHECKS, SUITES, endSteps, runStep, summary, vitest } from './test-steps.js';

/**
 * `npm test`: sets up all that the tests need, runs every check and suite, and ends what it started whatever happens.
 *
 * `--only STEP [file …]` runs one step (format, lint, types, "unused code", build, unit, integration, browser), and of a
 * suite only the files that match, with `--no-build` against the build that is there
 * (what follows a second `--` goes to vitest as it is); `--long` runs the tests that count into the thousands in full (`TRUNNION_LONG=1`);
 * `--bench` runs tests/bench alone, which prints ratios.
 *
 * @typedef {import('./test-steps.js').Outcome} Outcome
 */
const { values, positionals } = readArguments();

/** @type {import('./processes.js').Running[]} */
const services = [];
/** @type {Outcome[]} */
const outcomes = [];
let interrupted = false;

function readArguments() {
	try {
		return parseArgs({
			allowPositionals: true,
			options: {
				only: { type: 'string' },
				long: { type: 'boolean', default: false },
				bench: { type: 'boolean', default: false },
				'no-build': { type: 'boolean', default: false }
			}
		});
	} catch (error) {
		console.error(textOf(error));
		process.exit(2);
	}
}

const STEPS = [...CHECKS.map(([name]) => name), 'build', ...SUITES, 'bench'];

/** @param {string} step */
const wanted = (step) => (values.bench ? step === 'bench' || step === 'build' : isAsked(step));

/** @param {string} step */
function isAsked(step) {
	if (!values.only) return step !== 'bench';
	// The suites that need the built server build it first.
	const needsBuild = ['integration', 'browser'].includes(values.only) && !values['no-build'];
	return step === values.only || (step === 'build' && needsBuild);
}

/**
 * The services of this run, with its database migrated: the template of every test's own.
 * @param {string} folder
 * @returns {Promise<Record<string, string>>} what the tests need to know of them
 */
async function standUp(folder) {
	const stood = await startServices({
		home: folder,
		given: { PATH: process.env.PATH, HOME: process.env.HOME, LANG: process.env.LANG },
		throwAway: true,
		pagePort: 0,
		onStart: (one) => void services.push(one)
	});
	await migrate(stood.cluster, stood.env);
	const superuser = stood.cluster?.urls('trunnion').superuser ?? '';
	return {
		TRUNNION_TEST_HOME: folder,
		TRUNNION_TEST_SUPERUSER_URL: superuser,
		TRUNNION_TEST_TEMPLATE: 'trunnion',
		TRUNNION_TEST_ENV: JSON.stringify(stood.env)
	};
}

/** @param {Record<string, string | undefined>} env */
async function runChecks(env) {
	for (const [name, [tool, ...args]] of CHECKS)
		if (wanted(name) && !interrupted) outcomes.push(await runStep(name, [program(tool), ...args], { env }));
}

async function build() {
	const began = performance.now();
	let [ok, said] = [true, ''];
	try {
		if (!(await ensureBuild())) said = 'The build that is there was made from these sources.';
	} catch (error) {
		[ok, said] = [false, textOf(error)];
	}
	const seconds = (performance.now() - began) / 1000;
	console.log(`\n── build: ${ok ? 'ok' : 'FAILED'}, ${seconds.toFixed(1)} s ──${said ? `\n${said}` : ''}`);
	outcomes.push({ name: 'build', ok, seconds, counts: null });
	return ok;
}

/**
 * @param {string} suite
 * @param {string} folder
 * @param {Record<string, string | undefined>} env
 */
async function runSuite(suite, folder, env) {
	if (interrupted) return;
	const results = path.join(folder, `results-${suite}.json`);
	const filters = values.only ? positionals : [];
	const live = values.bench || values.only !== undefined;
	const limitMs = values.long || values.bench ? 4 * 3_600_000 : undefined;
	const command = vitest(suite, filters, results);
	outcomes.push(
		await runStep(suite, command, { env, live, limitMs, countsFrom: results, maySkip: filters.length > 0 })
	);
}

/** @param {string} folder */
async function run(folder) {
	const began = performance.now();
	/** @type {Record<string, string | undefined>} */
	const env = {
		...process.env,
		NODE_ENV: undefined,
		TRUNNION_LONG: values.long ? '1' : undefined,
		AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true'
	};
	const needsServices = ['integration', 'browser', 'bench'].some(wanted);
	if (wanted('browser')) env.TRUNNION_TEST_CHROMIUM = chromium();
	// Types of the routes, which lint and types read and the build writes too.
	const synced = await runToEnd([program('svelte-kit'), 'sync']);
	if (synced.code !== 0) throw new Mendable(`svelte-kit sync failed:\n${synced.output.trim()}`);
	const standing = needsServices ? standUp(folder) : Promise.resolve({});
	standing.catch(() => {}); // told where it is awaited
	const checks = runChecks(env);
	const built = wanted('build') ? await build() : true;
	Object.assign(env, await standing);
	if (needsServices) console.log(`\nSet up in ${((performance.now() - began) / 1000).toFixed(1)} s.`);
	if (wanted('unit')) await runSuite('unit', folder, env);
	// Some tests of the suites with services measure time: they have the machine to themselves.
	await checks;
	if (!built) return;
	for (const suite of ['integration', 'browser', 'bench'])
		if (wanted(suite)) await runSuite(suite, folder, env);
}

async function main() {
	if (values.only && !STEPS.includes(values.only))
		throw new Mendable(`There is no step "${values.only}"; the steps are ${STEPS.join(', ')}.`);
	checkNode();
	makeFolder(localFolder);
	await ensurePackages();
	const { folder, remove } = makeTestFolder();
	let failed = 1;
	try {
		await run(folder);
		outcomes.sort((a, b) => STEPS.indexOf(a.name) - STEPS.indexOf(b.name));
		const result = summary(outcomes);
		if (interrupted) result.lines.splice(-2, 0, 'The run was broken off.');
		else if (result.failed) result.lines.splice(-2, 0, `Logs and what was left of the tests: ${folder}`);
		failed = interrupted ? 1 : result.failed;
		await stopServices(services);
		console.log(result.lines.join('\n'));
	} finally {
		endSteps();
		await stopServices(services);
		if (!failed || interrupted) remove();
	}
	process.exitCode = failed ? 1 : 0;
}

function interrupt() {
	interrupted = true;
	endSteps();
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) process.on(signal, interrupt);
whenNpmIsGone(interrupt);

main().catch((error) => {
	console.error(error instanceof Mendable ? error.message : error);
	console.log('0 passed, 1 failed');
	process.exitCode = 1;
});
