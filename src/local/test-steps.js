import { spawn } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { root } from './place.js';
import { program } from './prepare.js';
import { endingWithUs } from './processes.js';

/**
 * The steps of `npm test`: each has a heading, a time and an outcome.
 * @typedef {{ passed: number, failed: number, skipped: number }} Counts
 * @typedef {{ name: string, ok: boolean, seconds: number, counts: Counts | null }} Outcome
 */

/** Static checks, in the order in which a person mends them. */
export const CHECKS = /** @type {const} */ ([
	['format', ['prettier', '--check', '.', '--log-level', 'warn']],
	['lint', ['eslint', '.']],
	[
		'types',
		['svelte-check', '--tsconfig', './tsconfig.json', '--threshold', 'warning', '--fail-on-warnings']
	],
	['unused code', ['knip']]
]);

export const SUITES = /** @type {const} */ (['unit', 'integration', 'browser']);

const STEP_LIMIT_MS = 30 * 60_000;

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();

/** Ends the steps that run now, with all that they started. */
export function endSteps() {
	for (const child of running) if (child.pid) process.kill(-child.pid, 'SIGTERM');
}

/**
 * Runs a step and shows all that it said under one heading, so that steps side by side do not mix.
 * @param {string} name
 * @param {string[]} command
 * @param {{ env: NodeJS.ProcessEnv, live?: boolean, limitMs?: number, countsFrom?: string | null,
 *   maySkip?: boolean }} options `live`: shown while it is said; `maySkip`: a filter leaves tests out
 * @returns {Promise<Outcome>}
 */
export async function runStep(
	name,
	command,
	{ env, live = false, limitMs = STEP_LIMIT_MS, countsFrom = null, maySkip = false }
) {
	const began = performance.now();
	if (live) console.log(`\n── ${name} ──`);
	const { code, output, late } = await runGroup(command, env, live, limitMs);
	const seconds = (performance.now() - began) / 1000;
	const counts = countsFrom ? readCounts(countsFrom) : null;
	if (counts && maySkip) counts.skipped = 0;
	const ok = code === 0 && !(counts && (counts.failed > 0 || counts.skipped > 0));
	if (!live) console.log(`\n── ${name}: ${ok ? 'ok' : 'FAILED'}, ${seconds.toFixed(1)} s ──`);
	if (!live && output.trim()) console.log(output.trimEnd());
	if (late) console.log(`${name} was ended after ${limitMs / 60_000} minutes.`);
	if (counts?.skipped) console.log(`${counts.skipped} tests were skipped; a skipped test counts as failed.`);
	return { name, ok, seconds, counts };
}

/**
 * @param {string[]} command
 * @param {NodeJS.ProcessEnv} env
 * @param {boolean} live
 * @param {number} limitMs
 * @returns {Promise<{ code: number | null, output: string, late: boolean }>}
 */
function runGroup(command, env, live, limitMs) {
	return new Promise((resolve, reject) => {
		// Its own process group, so that an overdue step ends with its own children.
		const [file = '', ...args] = endingWithUs(command, 'TERM');
		const child = spawn(file, args, {
			cwd: root,
			env,
			detached: true,
			stdio: live ? ['ignore', 'inherit', 'inherit'] : ['ignore', 'pipe', 'pipe']
		});
		running.add(child);
		let output = '';
		let late = false;
		for (const stream of [child.stdout, child.stderr])
			stream?.on('data', (chunk) => (output += String(chunk)));
		const timer = setTimeout(() => {
			late = true;
			if (child.pid) process.kill(-child.pid, 'SIGKILL');
		}, limitMs);
		child.on('error', reject);
		child.on('close', (code) => {
			clearTimeout(timer);
			running.delete(child);
			resolve({ code: late ? null : code, output, late });
		});
	});
}

/**
 * @param {string} suite
 * @param {string[]} filters
 * @param {string} results where the counts go
 */
export const vitest = (suite, filters, results) => [
	program('vitest'),
	'run',
	'--project',
	suite,
	'--reporter=default',
	'--reporter=json',
	`--outputFile.json=${results}`,
	...filters
];

/**
 * @param {string} file the JSON report of vitest
 * @returns {Counts} a suite that ended without a report, or a file that could not be read at all, has failed
 */
function readCounts(file) {
	if (!existsSync(file)) return { passed: 0, failed: 1, skipped: 0 };
	const report = JSON.parse(readFileSync(file, 'utf8'));
	const broken = report.testResults.filter(
		(/** @type {{ status: string, assertionResults: { status: string }[] }} */ one) =>
			one.status === 'failed' && !one.assertionResults.some((test) => test.status === 'failed')
	).length;
	return {
		passed: report.numPassedTests,
		failed: report.numFailedTests + broken,
		skipped: report.numPendingTests + report.numTodoTests
	};
}

/**
 * @param {Outcome[]} outcomes
 * @returns {{ lines: string[], failed: number }} the last line is the counts alone
 */
export function summary(outcomes) {
	let [passed, failed] = [0, 0];
	const lines = ['', '── summary ──'];
	for (const { name, ok, seconds, counts } of outcomes) {
		const tests = counts ? `  ${counts.passed} passed, ${counts.failed + counts.skipped} failed` : '';
		lines.push(`${ok ? 'ok    ' : 'FAILED'}  ${name.padEnd(12)} ${seconds.toFixed(1).padStart(7)} s${tests}`);
		passed += counts?.passed ?? 0;
		// A step that failed without a failed test, such as the format check, is one failure.
		failed += Math.max(counts ? counts.failed + counts.skipped : 0, ok ? 0 : 1);
	}
	lines.push('', `${passed} passed, ${failed} failed`);
	return { lines, failed };
}
