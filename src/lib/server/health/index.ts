import { sql } from 'kysely';
import { createTransport } from 'nodemailer';
import type { Deps } from '../deps';

export const VERSION = process.env.npm_package_version ?? '0.1.0';

type Standing = 'ok' | 'away';
export interface Health {
	status: 'ok' | 'degraded';
	database: Standing;
	storage: Standing;
	mail: Standing;
	worker: Standing;
	version: string;
}

const CHECK_MS = 3000;
/** A worker says it lives every 10 s; three missed and it counts as gone. */
const WORKER_SILENT_S = 30;

async function standing(check: () => Promise<unknown>): Promise<Standing> {
	let timer: NodeJS.Timeout | undefined;
	const late = new Promise<never>(
		(_, reject) => (timer = setTimeout(() => reject(new Error('too slow')), CHECK_MS))
	);
	try {
		await Promise.race([check(), late]);
		return 'ok';
	} catch {
		return 'away';
	} finally {
		clearTimeout(timer);
	}
}

async function checkMail(deps: Deps): Promise<void> {
	const transport = createTransport(deps.config.smtpUrl);
	try {
		await transport.verify();
	} finally {
		transport.close();
	}
}

async function checkWorker(deps: Deps): Promise<void> {
	const { rows } = await sql<{
		alive: boolean;
	}>`select jobs.workers_alive(${WORKER_SILENT_S}) > 0 as alive`.execute(deps.pools.lab);
	if (!rows[0]?.alive) throw new Error('no worker has been heard of lately');
}

/** Each dependency by itself; the whole is `ok` only when all are. */
export async function readHealth(deps: Deps): Promise<Health> {
	const [database, storage, mail, worker] = await Promise.all([
		standing(() => sql`select 1`.execute(deps.pools.lab)),
		standing(() => deps.store.check()),
		standing(() => checkMail(deps)),
		standing(() => checkWorker(deps))
	]);
	const all = { database, storage, mail, worker };
	return {
		status: Object.values(all).every((s) => s === 'ok') ? 'ok' : 'degraded',
		...all,
		version: VERSION
	};
}

/** Ready to serve = the database answers; a mail server that is away must not take the site down. */
export async function isReady(deps: Deps): Promise<boolean> {
	return (await standing(() => sql`select 1`.execute(deps.pools.lab))) === 'ok';
}
