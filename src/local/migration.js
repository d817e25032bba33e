import { readdirSync } from 'node:fs';
import path from 'node:path';
import { Mendable, root } from './place.js';
import { packagesHash, runToEnd } from './prepare.js';

/**
 * Brings the database to the newest schema.
 * @param {import('./cluster.js').Cluster | null} cluster null: someone else's, of which nothing is known
 * @param {Record<string, string>} env
 */
export async function migrate(cluster, env) {
	if (cluster && (await isUpToDate(cluster))) return;
	const { code, output } = await runToEnd([process.execPath, '--import', 'tsx', 'src/migrate.ts'], env);
	if (code !== 0) throw new Mendable(`The database could not be migrated:\n${output.trim()}`);
	console.log(output.trim());
	cluster?.remember({ migratedBy: packagesHash() });
}

/**
 * Asks the database itself, which may have been restored from elsewhere; the job queue's own schema changes only with the
 * packages.
 * @param {import('./cluster.js').Cluster} cluster
 */
async function isUpToDate({ isNew, kept, psql }) {
	if (isNew || kept.migratedBy !== packagesHash()) return false;
	const wanted = readdirSync(path.join(root, 'migrations'))
		.filter((name) => name.endsWith('.ts'))
		.map((name) => name.slice(0, -3));
	const ran = await psql('select name from kysely_migration', 'trunnion').catch(() => '');
	return wanted.sort().join('\n') === ran.split('\n').sort().join('\n');
}
