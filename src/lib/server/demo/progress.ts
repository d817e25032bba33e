import { sql } from 'kysely';
import { jsonb, reading, SYSTEM, writing } from '../db';
import type { Deps } from '../deps';

const BEGUN = 'demo.begin';
const COMPLETE = 'demo.complete';

/** How far the demo lab is. The audit trail says it: nobody can edit that away, and it survives a killed seed. */
export type Progress =
	| { is: 'none' }
	/** Somebody's own clients are here: nothing may be added. */
	| { is: 'other' }
	/** All its times count from this instant, also when it is completed days later. */
	| { is: 'begun'; at: Date }
	| { is: 'complete' };

export async function readProgress(deps: Deps): Promise<Progress> {
	return reading(deps.pools, SYSTEM, async (trx) => {
		const marks = await trx
			.selectFrom('audit')
			.select(['action', 'after'])
			.where('subject', '=', 'lab')
			.where('action', 'in', [BEGUN, COMPLETE])
			.execute();
		if (marks.some(({ action }) => action === COMPLETE)) return { is: 'complete' };
		const begun = marks.find(({ action }) => action === BEGUN);
		if (begun) return { is: 'begun', at: new Date((begun.after as { from: string }).from) };
		const client = await trx.selectFrom('client').select('id').limit(1).executeTakeFirst();
		return { is: client ? 'other' : 'none' };
	});
}

async function mark(deps: Deps, action: string, after: object): Promise<void> {
	await writing(deps.pools, SYSTEM, (trx) =>
		trx
			.insertInto('audit')
			.values({ actorId: null, clientId: null, action, subject: 'lab', after: jsonb(after) as never })
			.execute()
	);
}

export const markBegun = (deps: Deps, from: Date) => mark(deps, BEGUN, { from: from.toISOString() });
export const markComplete = (deps: Deps) => mark(deps, COMPLETE, {});

/** Runs `work` unless another process seeds this database already; then answers null. */
export async function alone<T>(deps: Deps, work: () => Promise<T>): Promise<T | null> {
	return deps.pools.lab.connection().execute(async (db) => {
		const { rows } = await sql<{ free: boolean }>`
			select pg_try_advisory_lock(hashtextextended('demo lab', 0)) as free`.execute(db);
		if (!rows[0]?.free) return null;
		try {
			return await work();
		} finally {
			await sql`select pg_advisory_unlock(hashtextextended('demo lab', 0))`.execute(db);
		}
	});
}
