import { setTimeout as sleep } from 'node:timers/promises';
import { Readable } from 'node:stream';
import pg from 'pg';
import { DEMO_RUNS } from '../../src/lib/server/demo/lab/runs';
import { castOf } from '../../src/lib/server/demo/people';
import { runFile } from '../../src/lib/server/demo/run-file';
import type { Deps } from '../../src/lib/server/deps';
import { getRun, NewRun, openRun } from '../../src/lib/server/runs';
import { receiveTrace } from '../../src/lib/server/traces';
import type { TestDatabase } from '../setup/database';

export const USERS_CLIENT = 'LHA';
export const USERS_FILE = 'of-a-user.csv';

const COUNTED = [
	'client',
	'public.person',
	'cell',
	'fuel',
	'fuel_batch',
	'limit_set',
	'limit_set_version',
	'engine',
	'build',
	'follow',
	'booking',
	'occupancy',
	'run',
	'log_line',
	'trace',
	'reduction',
	'audit'
];

/** Rows of the tables that a seed fills. */
export async function counts(database: Pick<TestDatabase, 'url'>): Promise<Record<string, number>> {
	const client = new pg.Client({ connectionString: database.url('superuser') });
	await client.connect();
	try {
		const found: Record<string, number> = {};
		for (const table of COUNTED)
			found[table] = Number((await client.query(`select count(*) as n from ${table}`)).rows[0].n);
		return found;
	} finally {
		await client.end();
	}
}

/** Rows as nobody of the application sees them. */
export async function rowsOf<T extends pg.QueryResultRow>(
	database: Pick<TestDatabase, 'url'>,
	query: string
) {
	const client = new pg.Client({ connectionString: database.url('superuser') });
	await client.connect();
	try {
		return (await client.query<T>(query)).rows;
	} finally {
		await client.end();
	}
}

/** What a user of the lab does while it is being filled in: opens a record, sends a trace, waits for its figures. */
export async function sendAsUser(deps: Deps): Promise<{ readyAfterMs: number }> {
	const operator = (await castOf(deps))('operator');
	const plan = DEMO_RUNS.find(({ client }) => client === USERS_CLIENT)!;
	const run = await openRun(
		deps,
		operator,
		NewRun.parse({
			client: plan.client,
			build: plan.build,
			cell: plan.cell,
			fuelBatch: plan.batch,
			kind: plan.kind,
			startedAt: new Date().toISOString(),
			ambient: plan.air
		})
	);
	const began = performance.now();
	await receiveTrace(deps, operator, run.number, {
		filename: USERS_FILE,
		body: Readable.from([runFile(plan).bytes]),
		declaredBytes: null
	});
	while ((await getRun(deps, operator, run.number)).traces[0]!.state !== 'ready') await sleep(50);
	return { readyAfterMs: performance.now() - began };
}
