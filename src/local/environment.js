import { homedir } from 'node:os';
import { LOGINS, roleOf } from './roles.js';

/**
 * What the application reads from its environment, and nothing else:
 *
 * - `DATABASE_URL_OWNER`, `_LAB`, `_CLIENT`, `_AUTH`, `_QUEUE`: one PostgreSQL URL for each login (roles.js says what each
 *   is for). `DATABASE_URL` alone stands for all five: the same host, database and password under each role's name.
 * - `S3_ENDPOINT`, `S3_BUCKET`, `S3_REGION`, `S3_ACCESS_KEY_ID`, `S3_SECRET_ACCESS_KEY`: the object store.
 * - `SMTP_URL`, `MAIL_FROM`: where mail goes out, and from whom.
 * - `ORIGIN`, `HOST`, `PORT`, `BODY_SIZE_LIMIT`, `SHUTDOWN_TIMEOUT`: the web server.
 * - `LAB_NAME`, `LAB_TIME_ZONE` (the laboratory's wall clock, an IANA name), `MAX_TRACE_BYTES`, `LOG_LEVEL`: as they are in
 *   the application's own configuration, which knows their defaults.
 *
 * `npm start` fills in what services are not set, and starts on this machine only what it filled in.
 *
 * @typedef {Record<string, string>} Settings
 * @typedef {{ S3_ENDPOINT: string, S3_BUCKET: string, S3_REGION: string, S3_ACCESS_KEY_ID: string,
 *   S3_SECRET_ACCESS_KEY: string }} StoreSettings
 */

/** @param {import('./roles.js').Login} login */
const nameOf = (login) => `DATABASE_URL_${login.toUpperCase()}`;

/** @param {NodeJS.ProcessEnv} env */
export const hasOwnDatabase = (env) =>
	Boolean(env.DATABASE_URL) || LOGINS.some((login) => Boolean(env[nameOf(login)]));

/** @param {NodeJS.ProcessEnv} env */
export const hasOwnStore = (env) => Boolean(env.S3_ENDPOINT || env.S3_BUCKET);

/** @param {NodeJS.ProcessEnv} env */
export const hasOwnMail = (env) => Boolean(env.SMTP_URL);

/**
 * The URLs of a database that someone else runs.
 * @param {NodeJS.ProcessEnv} env
 * @returns {Settings}
 */
export function databaseSettings(env) {
	return Object.fromEntries(
		LOGINS.flatMap((login) => {
			const own = env[nameOf(login)];
			if (own) return [[nameOf(login), own]];
			if (!env.DATABASE_URL) return [];
			const url = new URL(env.DATABASE_URL);
			url.username = roleOf(login);
			return [[nameOf(login), url.href]];
		})
	);
}

/**
 * @param {Record<import('./roles.js').Login, string>} urls
 * @returns {Settings}
 */
export const localDatabaseSettings = (urls) =>
	Object.fromEntries(LOGINS.map((login) => [nameOf(login), urls[login]]));

/**
 * Where the web server listens, and under what address people reach it.
 * @param {NodeJS.ProcessEnv} env
 */
export function webSettings(env) {
	const host = env.HOST || '127.0.0.1';
	const port = env.PORT || '5180';
	const shown = ['127.0.0.1', '0.0.0.0', '::', '::1'].includes(host) ? 'localhost' : host;
	return { HOST: host, PORT: port, ORIGIN: env.ORIGIN || `http://${shown}:${port}` };
}

/**
 * Everything else, with what was set kept.
 * @param {NodeJS.ProcessEnv} env
 * @returns {Settings}
 */
export const otherSettings = (env) => ({
	NODE_ENV: 'production',
	// Routes set their own, smaller limits; this one only has to let the largest trace through.
	BODY_SIZE_LIMIT: env.BODY_SIZE_LIMIT || '4G',
	SHUTDOWN_TIMEOUT: env.SHUTDOWN_TIMEOUT || '10',
	AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true'
});

/**
 * What a child needs of the surroundings of the launcher; the rest (npm's own variables, other tools' secrets) stays out.
 * @param {NodeJS.ProcessEnv} env
 * @returns {Settings}
 */
export function surroundings(env) {
	const kept = [
		'PATH',
		'HOME',
		'LANG',
		'LC_ALL',
		'TMPDIR',
		'NODE_OPTIONS',
		'NODE_EXTRA_CA_CERTS',
		'npm_package_version'
	];
	const entries = [
		...kept,
		...Object.keys(env).filter((name) => /^(S3_|SMTP_|MAIL_|TRUNNION_|LAB_|LOG_|MAX_)/.test(name))
	]
		.map((name) => [name, env[name]])
		.filter((entry) => entry[1] !== undefined);
	return { HOME: homedir(), TZ: 'UTC', ...Object.fromEntries(entries) };
}
