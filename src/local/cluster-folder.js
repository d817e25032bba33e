import { execFile } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import {
	chownSync,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readFileSync,
	readdirSync,
	rmSync,
	statSync,
	writeFileSync
} from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { postgresPrograms, serverUser } from './debian.js';
import { Mendable, readJson, textOf, writeSecretJson } from './place.js';
import { endingWithUs } from './processes.js';
import { LOGINS } from './roles.js';

/**
 * The folder of the private cluster and what must outlive a stop: `cluster.json`, readable by its owner alone.
 *
 * @typedef {{ folder: string, complete: boolean, superuserPassword: string,
 *   passwords: Record<import('./roles.js').Login, string>, seeded: boolean, migratedBy: string }} Kept `complete`: initdb came to its
 *   end; `migratedBy`: the packages' hash at the last migration
 */

const run = promisify(execFile);
const secret = () => randomBytes(24).toString('hex');

/** @param {string} home */
const keptFile = (home) => path.join(home, 'cluster.json');

/**
 * @param {string} home
 * @returns {Kept | null}
 */
function readKept(home) {
	const kept = /** @type {Kept | null} */ (readJson(keptFile(home)));
	return kept && typeof kept.folder === 'string' && typeof kept.superuserPassword === 'string' ? kept : null;
}

/**
 * @param {string} home
 * @param {Kept} kept
 */
export const writeKept = (home, kept) => writeSecretJson(keptFile(home), kept);

/** @param {string} home */
export const clusterExists = (home) => readKept(home)?.complete === true;

/**
 * Runs a short command as the server's user; it ends with the launcher.
 * @param {string[]} command
 */
function asServer(command) {
	const [file = '', ...args] = endingWithUs(command, 'KILL', serverUser());
	return run(file, args, { cwd: '/', env: { ...process.env, LC_ALL: 'C.UTF-8' } });
}

/**
 * A folder that the server's user owns: below `home`, or in /var/tmp when that user cannot get there.
 * @param {string} home
 */
async function makeServerFolder(home) {
	const user = serverUser();
	const wished = path.join(home, 'cluster');
	mkdirSync(wished, { recursive: true, mode: 0o700 });
	if (!user) return wished;
	chownSync(wished, user.uid, user.gid);
	const reachable = await asServer(['test', '-w', wished]).then(
		() => true,
		() => false
	);
	if (reachable) return wished;
	rmSync(wished, { recursive: true });
	const elsewhere = mkdtempSync('/var/tmp/trunnion-');
	chownSync(elsewhere, user.uid, user.gid);
	return elsewhere;
}

/**
 * The folder, made when there is none. One that was cut off while being made is made anew, unless a database had already
 * been created in it.
 * @param {string} home
 * @param {boolean} throwAway
 * @returns {Promise<{ kept: Kept, bin: string, isNew: boolean }>}
 */
export async function ensureFolder(home, throwAway) {
	const kept = readKept(home);
	const folder = kept?.folder ?? path.join(home, 'cluster');
	const data = path.join(folder, 'data');
	if (kept?.complete) return { kept, bin: postgresPrograms(checkedVersion(home, folder)), isNew: false };
	if (hasDatabase(data))
		throw new Mendable(
			`The private database in ${folder} holds data, but ${keptFile(home)}, which has its passwords, is missing or cut off. ` +
				`Put that file back, or move ${folder} away to begin with an empty database.`
		);
	const bin = postgresPrograms(null);
	rmSync(folder, { recursive: true, force: true });
	const passwords = /** @type {Kept['passwords']} */ (
		Object.fromEntries(LOGINS.map((login) => [login, secret()]))
	);
	const made = {
		folder: await makeServerFolder(home),
		complete: false,
		superuserPassword: secret(),
		passwords,
		seeded: false,
		migratedBy: ''
	};
	writeKept(home, made);
	await initialise(bin, made, throwAway);
	const complete = { ...made, complete: true };
	writeKept(home, complete);
	return { kept: complete, bin, isNew: true };
}

/**
 * The PostgreSQL version of a complete cluster, once it is sure that this user may run it.
 * @param {string} home
 * @param {string} folder
 */
function checkedVersion(home, folder) {
	const owner = statSync(folder, { throwIfNoEntry: false })?.uid;
	const version = path.join(folder, 'data', 'PG_VERSION');
	const expected = serverUser()?.uid ?? process.getuid?.();
	if (owner !== undefined && owner !== expected)
		throw new Mendable(
			`The private database in ${folder} belongs to the user with the number ${owner}, not to ${expected}. ` +
				`Start as the user who made it, or move ${folder} and ${keptFile(home)} away to begin with an empty database.`
		);
	if (owner === undefined || !existsSync(version))
		throw new Mendable(
			`The private database was in ${folder}, which is gone. Put it back, or remove ${keptFile(home)} to begin with an empty database.`
		);
	return Number(readFileSync(version, 'utf8'));
}

/**
 * Whether a database beyond PostgreSQL's own three was ever created: those of users are numbered from 16384.
 * @param {string} data
 */
function hasDatabase(data) {
	const base = path.join(data, 'base');
	return existsSync(base) && readdirSync(base).some((name) => Number(name) >= 16384);
}

/**
 * @param {string} bin
 * @param {Kept} kept
 * @param {boolean} throwAway
 */
async function initialise(bin, kept, throwAway) {
	const user = serverUser();
	const passwordFile = path.join(kept.folder, 'password');
	writeFileSync(passwordFile, kept.superuserPassword, { mode: 0o600 });
	if (user) chownSync(passwordFile, user.uid, user.gid);
	const options = [
		'--username=postgres',
		'--auth=scram-sha-256',
		`--pwfile=${passwordFile}`,
		'--encoding=UTF8',
		'--locale=C.UTF-8',
		'--no-instructions'
	];
	options.push(throwAway ? '--no-sync' : '--data-checksums');
	try {
		await asServer([path.join(bin, 'initdb'), ...options, '-D', path.join(kept.folder, 'data')]);
	} catch (error) {
		const said = error instanceof Error && 'stderr' in error ? String(error.stderr).trim() : textOf(error);
		throw new Mendable(
			`The private database could not be made in ${kept.folder}: ${said.split('\n').slice(-2).join(' ')}`
		);
	} finally {
		rmSync(passwordFile, { force: true });
	}
}
