import { sql, type Kysely } from 'kysely';

/**
 * Trends ask for one figure of all runs: the code leads, so that staff, whom no client narrows down, read that figure alone.
 * It serves a client as well, whose rows it then has together.
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create index metric_current_code on metric (code, client_id, run_id) include (value, u, unit, outside_range)
		where is_current`.execute(db);
	await sql`drop index metric_current`.execute(db);
}
