import { readConfig } from './lib/server/config';
import { migrate } from './lib/server/db';

const config = readConfig(process.env);
try {
	const ran = await migrate(
		{ owner: config.databaseUrl('owner'), queue: config.databaseUrl('queue') },
		'migrations'
	);
	console.log(ran.length ? `Migrated: ${ran.join(', ')}` : 'The database is up to date.');
} catch (error) {
	console.error(error);
	process.exitCode = 1;
}
