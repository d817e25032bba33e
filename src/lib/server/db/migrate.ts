import { FileMigrationProvider, Kysely, Migrator, PostgresDialect } from 'kysely';
import { runMigrations } from 'graphile-worker';
import { promises as fs } from 'node:fs';
import path from 'node:path';
import pg from 'pg';

/**
 * Brings a database to the newest schema: our migrations as the owner, the queue's own as the queue's login.
 * Two processes at once are safe: Kysely takes a lock, graphile-worker loses cleanly.
 * @returns names of the migrations that ran now
 */
export async function migrate(urls: { owner: string; queue: string }, folder: string): Promise<string[]> {
	const pool = new pg.Pool({ connectionString: urls.owner, max: 2 });
	const db = new Kysely<unknown>({ dialect: new PostgresDialect({ pool }) });
	try {
		await takePublicSchema(pool);
		const migrator = new Migrator({
			db,
			provider: new FileMigrationProvider({ fs, path, migrationFolder: path.resolve(folder) })
		});
		const { error, results = [] } = await migrator.migrateToLatest();
		if (error) {
			const failed = results.find((r) => r.status === 'Error')?.migrationName;
			throw new Error(`Migration ${failed ?? ''} failed; nothing of it was kept.`, { cause: error });
		}
		await runMigrations({ connectionString: urls.queue });
		return results.filter((r) => r.status === 'Success').map((r) => r.migrationName);
	} finally {
		await db.destroy();
	}
}

/** Since PostgreSQL 15 `public` belongs to the database's owner, whose rights a NOINHERIT login has only after SET ROLE. */
async function takePublicSchema(pool: pg.Pool): Promise<void> {
	await pool.query(`begin; select pg_advisory_xact_lock(hashtextextended('public schema', 0));
		set local role pg_database_owner; revoke all on schema public from public;
		grant all on schema public to trunnion_owner with grant option; commit`);
}
