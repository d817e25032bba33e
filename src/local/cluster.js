import { execFile } from 'node:child_process';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { promisify } from 'node:util';
import { ensureFolder, writeKept } from './cluster-folder.js';
import { serverUser } from './debian.js';
import { Mendable, makeFolder } from './place.js';
import { endProcess, freePort, isAlive, lastLines, markOf, startProcess } from './processes.js';
import { LOGINS, databaseGrants, roleOf, rolesSql } from './roles.js';

/**
 * A PostgreSQL server of our own: on 127.0.0.1 only, on a free port, in a folder of its own, never as root.
 *
 * @typedef {import('./roles.js').Login} Login
 * @typedef {import('./cluster-folder.js').Kept} Kept
 * @typedef {{ running: import('./processes.js').Running, port: number, kept: Kept, isNew: boolean,
 *   psql: (sql: string, database?: string) => Promise<string>, urls: (database: string) => Record<Login | 'superuser', string>,
 *   remember: (news: Partial<Pick<Kept, 'seeded' | 'migratedBy'>>) => void }} Cluster
 */

const run = promisify(execFile);

/** Fast and forgetful: for clusters that are thrown away. */
const THROW_AWAY = [
	'fsync=off',
	'full_page_writes=off',
	'synchronous_commit=off',
	'max_connections=200',
	'max_wal_size=4GB'
];

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
 * @param {{ name: string, log: string, throwAway: boolean, onStart: (running: import('./processes.js').Running) => void }} options
 * @returns {Promise<Cluster>}
 */
export async function startCluster(home, { name, log, throwAway, onStart }) {
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
	const { running, port } = await startServer(bin, data, settings, { name, log, onStart });

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
		remember: (/** @type {Partial<Kept>} */ news) => writeKept(home, Object.assign(kept, news))
	};
	await psql(rolesSql(kept.passwords));
	await ensureDatabase(cluster, 'trunnion');
	return cluster;
}

/**
 * @param {string} bin
 * @param {string} data
 * @param {string[]} settings
 * @param {{ name: string, log: string, onStart: (running: import('./processes.js').Running) => void }} options
 */
async function startServer(bin, data, settings, { name, log, onStart }) {
	const user = serverUser();
	for (let attempt = 1; ; attempt++) {
		const port = await freePort();
		const options = [...settings, `port=${port}`].flatMap((one) => ['-c', one]);
		const running = startProcess(name, [path.join(bin, 'postgres'), '-D', data, ...options], {
			env: { PATH: process.env.PATH, LC_ALL: 'C.UTF-8' },
			cwd: '/',
			log,
			lastSignal: 'INT',
			user
		});
		onStart(running);
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
}
