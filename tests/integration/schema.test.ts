import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { expect, it } from 'vitest';
import { useDatabase } from '../setup/database';

const database = useDatabase();

it('the committed types are those of the migrated database', async () => {
	const { stdout, stderr } = await promisify(execFile)('npx', [
		'kysely-codegen',
		'--verify',
		'--url',
		database.url('superuser')
	]);
	expect(stdout + stderr).toContain('up-to-date');
});

it('migrating again, by two processes at once, changes nothing', async () => {
	const migrate = () =>
		promisify(execFile)(process.execPath, ['--import', 'tsx', 'src/migrate.ts'], {
			env: { ...process.env, ...database.env }
		});
	const said = (await Promise.all([migrate(), migrate()])).map(({ stdout }) => stdout.trim());
	expect(said).toEqual(Array(2).fill('The database is up to date.'));
});
