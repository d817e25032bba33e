import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, readdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Mendable } from './place.js';

const isRoot = process.getuid?.() === 0;

const OLDEST_POSTGRES = 15;

/**
 * Installs Debian packages as root; anyone else is told what to install.
 * @param {string[]} packages
 * @param {string} why
 */
function install(packages, why) {
	const names = packages.join(' ');
	const command = `apt-get install --no-install-recommends ${names}`;
	if (!isRoot || !existsSync('/usr/bin/apt-get'))
		throw new Mendable(`${why} Install it first, as root: ${command}`);
	console.error(`Installing ${names} from Debian …`);
	const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
	/** @param {string[]} args */
	const apt = (args) =>
		spawnSync('apt-get', ['-q', '-y', '-o', 'DPkg::Lock::Timeout=120', ...args], { env, encoding: 'utf8' });
	const wanted = ['install', '--no-install-recommends', ...packages];
	// A fresh image has no package lists, a machine in use has old ones: fetch them only when the first try fails.
	let result = apt(wanted);
	if (result.status !== 0) {
		apt(['update']);
		result = apt(wanted);
	}
	if (result.status !== 0)
		throw new Mendable(
			`${why} "${command}" failed; mend that and start again. It said: ${result.stderr.trim().split('\n').slice(-3).join(' ')}`
		);
}

/** @returns {{ major: number, bin: string }[]} newest first */
function installedPostgres() {
	const base = '/usr/lib/postgresql';
	if (!existsSync(base)) return [];
	return readdirSync(base)
		.map((name) => ({ major: Number(name), bin: path.join(base, name, 'bin') }))
		.filter(({ major, bin }) => major >= OLDEST_POSTGRES && existsSync(path.join(bin, 'initdb')))
		.sort((a, b) => b.major - a.major);
}

/** The Debian package would otherwise start a cluster of its own for the whole machine. */
function keepDebianFromMakingACluster() {
	const file = '/etc/postgresql-common/createcluster.conf';
	const before = existsSync(file) ? readFileSync(file, 'utf8') : '';
	if (/^\s*create_main_cluster\s*=\s*false/m.test(before)) return;
	mkdirSync(path.dirname(file), { recursive: true });
	writeFileSync(
		file,
		`${before.replace(/^\s*create_main_cluster\s*=.*$/gm, '')}create_main_cluster = false\n`
	);
}

/**
 * The folder of the server's programs; installs PostgreSQL when it is missing.
 * @param {number | null} major the version that an existing cluster was made by
 */
export function postgresPrograms(major) {
	if (installedPostgres().length === 0) {
		if (isRoot) keepDebianFromMakingACluster();
		install(['postgresql'], `PostgreSQL ${OLDEST_POSTGRES} or newer is needed.`);
	}
	const found = installedPostgres();
	const match = major === null ? found[0] : found.find((one) => one.major === major);
	if (match) return match.bin;
	if (major === null)
		throw new Mendable(`PostgreSQL ${OLDEST_POSTGRES} or newer is needed; Debian installed an older one.`);
	throw new Mendable(
		`The private database was made by PostgreSQL ${major}, which is no longer installed. ` +
			`Install it (apt-get install --no-install-recommends postgresql-${major}), or move the database over with pg_upgrade.`
	);
}

/** The browser of the browser tests; only the tests need it. */
export function chromium() {
	const program = '/usr/bin/chromium';
	if (!existsSync(program)) install(['chromium'], 'Chromium is needed for the browser tests.');
	return program;
}

/**
 * Who runs the database server: PostgreSQL refuses to run as root.
 * @returns {{ uid: number, gid: number } | null} null: whoever runs this
 */
export function serverUser() {
	if (!isRoot) return null;
	const line = readFileSync('/etc/passwd', 'utf8')
		.split('\n')
		.find((one) => one.startsWith('postgres:'));
	const [, , uid, gid] = line?.split(':') ?? [];
	if (!uid || !gid)
		throw new Mendable(
			'The user "postgres" is missing; reinstall the package postgresql-common, or start as a user other than root.'
		);
	return { uid: Number(uid), gid: Number(gid) };
}
