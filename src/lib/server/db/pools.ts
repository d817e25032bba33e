import { CamelCasePlugin, Kysely, PostgresDialect, type Transaction } from 'kysely';
import pg from 'pg';
import { log } from '../config';
import { parseRange } from './ranges';
import type { DB } from './types';

export type Db = Kysely<DB>;
export type Trx = Transaction<DB>;

/** One login each: what a connection may see is decided by who it is, not by a query that remembers to ask. */
export interface Pools {
	lab: Db;
	client: Db;
	auth: Db;
	/** The raw pool of the auth login, for the session library's adapter. */
	authPool: pg.Pool;
	queuePool: pg.Pool;
	close(): Promise<void>;
}

// int8 counts and sizes are safe integers here; ranges come as their two instants; dates stay text.
const INT8 = 20;
const TSTZRANGE = 3910;
pg.types.setTypeParser(INT8, (text) => {
	const value = Number(text);
	if (!Number.isSafeInteger(value)) throw new Error(`int8 beyond safe integers: ${text}`);
	return value;
});
pg.types.setTypeParser(pg.types.builtins.DATE, (text) => text);
pg.types.setTypeParser(TSTZRANGE as typeof pg.types.builtins.INT8, (text) => parseRange(text));

function openPool(url: string, max: number): pg.Pool {
	const pool = new pg.Pool({
		connectionString: url,
		max,
		connectionTimeoutMillis: 10_000,
		options: '-c timezone=UTC'
	});
	// Without a handler an idle connection's error ends the process.
	pool.on('error', (error) => log.warn({ err: error }, 'idle database connection lost'));
	pool.on('connect', (client) =>
		client.on('error', (error) => log.warn({ err: error }, 'database connection lost'))
	);
	return pool;
}

export interface DatabaseUrls {
	lab: string;
	client: string;
	auth: string;
	queue: string;
}

export function openPools(urls: DatabaseUrls, max = 8): Pools {
	const raw = {
		lab: openPool(urls.lab, max),
		client: openPool(urls.client, max),
		auth: openPool(urls.auth, max),
		queue: openPool(urls.queue, max)
	};
	const kysely = (pool: pg.Pool) =>
		new Kysely<DB>({
			dialect: new PostgresDialect({ pool }),
			plugins: [new CamelCasePlugin({ maintainNestedObjectKeys: true })]
		});
	const dbs = { lab: kysely(raw.lab), client: kysely(raw.client), auth: kysely(raw.auth) };
	return {
		...dbs,
		authPool: raw.auth,
		queuePool: raw.queue,
		close: async () => {
			await Promise.all([dbs.lab.destroy(), dbs.client.destroy(), dbs.auth.destroy(), raw.queue.end()]);
		}
	};
}
