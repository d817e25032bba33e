import { execFile } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import {
	chmodSync,
	chownSync,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readFileSync,
	readdirSync,
	rmSync,
	writeFileSync
} from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { promisify } from 'node:util';
import { postgresPrograms, serverUser } from './debian.js';
import { Mendable, makeFolder, readJson, textOf, writeSecretJson } from './place.js';
import { endProcess, freePort, isAlive, lastLines, markOf, startProcess } from './processes.js';
import { LOGINS, databaseGrants, roleOf, rolesSql } from './roles.js';

/**
 * A PostgreSQL server of our own: on 127.0.0.1 only, on a free port, in a folder of its own, never as root.
 * What must outlive a stop stands in `cluster.json` beside it, readable by its owner alone.
 *
 * @typedef {import('./roles.js').Login} Login
 * @typedef {{ folder: string, superuserPassword: string, passwords: Record<Login, string>, seeded: boolean }} Kept
 * @typedef {{ running: import('./processes.js').Running, port: number, kept: Kept, isNew: boolean,
 *   psql: (sql: string, database?: string) => Promise<string>, urls: (database: string) => Record<Login | 'superuser', string>,
 *   rememberSeeded: () => void, stop: () => Promise<void> }} Cluster
 */

const run = promisify(execFile);
const secret = () => randomBytes(24).toString('hex');

/** Fast and forgetful: for clusters that are thrown away. */
const THROW_AWAY = [
	'fsync=off',
	'full_page_writes=off',
	'synchronous_commit=off',
	'max_connections=200',
	'max_wal_size=4GB'
];

/** @param {string} folder the folder that holds, or will hold, `cluster.json` */
const keptFile = (folder) => path.join(folder, 'cluster.json');

/**
 * @param {string} home
 * @returns {Kept | null}
 */
function readKept(home) {
	const kept = /** @type {Kept | null} */ (readJson(keptFile(home)));
	return kept && typeof kept.folder === 'string' && typeof kept.superuserPassword === 'string' ? kept : null;
}

/** @param {string} home */
export const clusterExists = (home) => {
	const kept = readKept(home);
	return kept !== null && existsSync(path.join(kept.folder, 'complete'));
};

/**
 * @param {string[]} command
 * @param {string} [cwd]
 */
function asServer(command, cwd = '/') {
	const user = serverUser();
	const line = user
		? ['setpriv', `--reuid=${user.uid}`, `--regid=${user.gid}`, '--init-groups', ...command]
		: command;
	return run(line[0] ?? '', line.slice(1), { cwd, env: { ...process.env, LC_ALL: 'C.UTF-8' } });
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
 * The folder, made when there is none. A folder without the mark `complete` was cut off while being made; it is made anew
 * unless a database of ours had already been created in it.
 * @param {string} home
 * @param {boolean} throwAway
 * @returns {Promise<{ kept: Kept, bin: string, isNew: boolean }>}
 */
async function ensureFolder(home, throwAway) {
	let kept = readKept(home);
	const folder = kept?.folder ?? path.join(home, 'cluster');
	const data = path.join(folder, 'data');
	const holdsData = hasDatabase(data);
	if (kept && existsSync(path.join(folder, 'complete'))) {
		const version = Number(readFileSync(path.join(data, 'PG_VERSION'), 'utf8'));
		return { kept, bin: postgresPrograms(version), isNew: false };
	}
	if (holdsData)
		throw new Mendable(
			`The private database in ${folder} holds data, but ${kept ? 'its mark "complete"' : keptFile(home)} is missing. ` +
				`Put that file back, or move ${folder} away to begin with an empty database.`
		);
	const bin = postgresPrograms(null);
	rmSync(folder, { recursive: true, force: true });
	const made = await makeServerFolder(home);
	const passwords = /** @type {Record<Login, string>} */ (
		Object.fromEntries(LOGINS.map((login) => [login, secret()]))
	);
	kept = { folder: made, superuserPassword: secret(), passwords, seeded: false };
	writeSecretJson(keptFile(home), kept);
	await initialise(bin, kept, throwAway);
	return { kept, bin, isNew: true };
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
	writeFileSync(path.join(kept.folder, 'complete'), 'initdb came to its end here.\n');
	chmodSync(kept.folder, 0o700);
}

/**
 * A killed launcher can leave our own server running, a killed machine a `postmaster.pid` whose number is another's by now.
 * @param {string} data
 */
async function clearPidFile(data) {
	const file = path.join(data, 'postmaster.pid');
	if (!existsSync(file)) return;
	const mark = markOf(Number(readFileSync(file, 'utf8').split('\n')[0]));
	const command = isAlive(mark) ? readFileSync(`/proc/${mark.pid}/cmdline`, 'utf8').split('\0') : [];
	if (command.includes(data) && path.basename(command[0] ?? '') === 'postgres')
		await endProcess(mark, 'SIGINT', 15_000);
	rmSync(file, { force: true });
}

/**
 * Starts the cluster that lives in `home`, making it first when there is none, and sees to its roles and the
 * database `trunnion`.
 * @param {string} home
 * @param {{ log: string, throwAway?: boolean }} options
 * @returns {Promise<Cluster>}
 */
export async function startCluster(home, { log, throwAway = false }) {
	makeFolder(home);
	const { kept, bin, isNew } = await ensureFolder(home, throwAway);
	const data = path.join(kept.folder, 'data');
	await clearPidFile(data);
	const settings = [
		'listen_addresses=127.0.0.1',
		'unix_socket_directories=',
		'timezone=UTC',
		'log_timezone=UTC',
		'lc_messages=C',
		'jit=off',
		'shared_buffers=256MB'
	];
	if (throwAway) settings.push(...THROW_AWAY);
	const { running, port } = await startServer(bin, data, settings, log);

	const psql = async (/** @type {string} */ sql, database = 'postgres') => {
		const env = {
			...process.env,
			PGPASSWORD: kept.superuserPassword,
			PGOPTIONS: '-c client_min_messages=warning'
		};
		const args = [
			'-X',
			'-q',
			'-A',
			'-t',
			'-v',
			'ON_ERROR_STOP=1',
			'-h',
			'127.0.0.1',
			'-p',
			String(port),
			'-U',
			'postgres',
			'-d',
			database
		];
		const pending = run(path.join(bin, 'psql'), args, { env });
		pending.child.stdin?.end(sql);
		return (await pending).stdout.trim();
	};
	const urls = (/** @type {string} */ database) => {
		const at = `127.0.0.1:${port}/${database}`;
		const entries = LOGINS.map((login) => [
			login,
			`postgres://${roleOf(login)}:${kept.passwords[login]}@${at}`
		]);
		return /** @type {Record<Login | 'superuser', string>} */ (
			Object.fromEntries([...entries, ['superuser', `postgres://postgres:${kept.superuserPassword}@${at}`]])
		);
	};
	const cluster = {
		running,
		port,
		kept,
		isNew,
		psql,
		urls,
		rememberSeeded: () => writeSecretJson(keptFile(home), { ...kept, seeded: true }),
		stop: () => endProcess(running, 'SIGINT', 20_000)
	};
	try {
		await psql(rolesSql(kept.passwords));
		await ensureDatabase(cluster, 'trunnion');
	} catch (error) {
		await cluster.stop();
		throw error;
	}
	return cluster;
}

/**
 * @param {string} bin
 * @param {string} data
 * @param {string[]} settings
 * @param {string} log
 */
async function startServer(bin, data, settings, log) {
	const user = serverUser();
	for (let attempt = 1; ; attempt++) {
		const port = await freePort();
		const options = [...settings, `port=${port}`].flatMap((one) => ['-c', one]);
		const running = startProcess('database', [path.join(bin, 'postgres'), '-D', data, ...options], {
			env: { PATH: process.env.PATH, LC_ALL: 'C.UTF-8' },
			cwd: '/',
			log,
			lastSignal: 'INT',
			user: user && { name: String(user.uid), group: String(user.gid) }
		});
		/** @type {string | null} */
		let ended = null;
		void running.gone.then((how) => (ended = how));
		for (let waitedMs = 0; ended === null && waitedMs < 120_000; waitedMs += 50) {
			const ready = await run(path.join(bin, 'pg_isready'), [
				'-q',
				'-h',
				'127.0.0.1',
				'-p',
				String(port)
			]).then(
				() => true,
				() => false
			);
			if (ready) return { running, port };
			await sleep(50);
		}
		const said = lastLines(log, 4);
		// Someone may take the port between our asking and the server's binding it.
		if (ended !== null && /Address already in use/.test(said) && attempt < 5) continue;
		await endProcess(running, 'SIGINT', 5_000);
		throw new Mendable(
			`The private database ${ended ?? 'did not answer in two minutes'}; its log ${log} ends with: ${said}`
		);
	}
}

/**
 * @param {Pick<Cluster, 'psql'>} cluster
 * @param {string} name
 */
async function ensureDatabase({ psql }, name) {
	const there = await psql(`select 1 from pg_database where datname = '${name}'`);
	if (!there) await psql(`create database "${name}" owner trunnion_owner template template0`);
	await psql(databaseGrants(name).join(';\n'));
	// NOINHERIT keeps the owner from being taken for `pg_database_owner`: say it outright.
	if (!there) await psql('alter schema public owner to trunnion_owner', name);
}
