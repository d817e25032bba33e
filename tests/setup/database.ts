import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { afterAll, beforeAll, type RunnerTestSuite } from 'vitest';
import { LOGINS, databaseGrants } from '../../src/local/roles.js';
import { testServices } from './services';

type Login = (typeof LOGINS)[number];

export interface TestDatabase {
	readonly name: string;
	/** As which role to connect; `superuser` bypasses row-level security and is for looking behind the application. */
	url(login: Login | 'superuser'): string;
	/** The application's environment with this database and a bucket of its own. */
	readonly env: Record<string, string>;
	drop(): Promise<void>;
}

/** A copy of the migrated template; takes some tens of milliseconds. */
export async function createDatabase(): Promise<TestDatabase> {
	const { superuserUrl, template, env } = testServices();
	const name = `test_${randomBytes(6).toString('hex')}`;
	await asSuperuser(superuserUrl, [
		`create database "${name}" template "${template}" strategy file_copy`,
		...databaseGrants(name)
	]);
	const at = (url: string) => {
		const own = new URL(url);
		own.pathname = `/${name}`;
		return own.href;
	};
	const names = LOGINS.map((login) => [login, `DATABASE_URL_${login.toUpperCase()}`] as const);
	const urls = Object.fromEntries(names.map(([login, key]) => [login, at(env[key] ?? '')]));
	return {
		name,
		url: (login) => (login === 'superuser' ? at(superuserUrl) : (urls[login] ?? '')),
		env: {
			...env,
			...Object.fromEntries(names.map(([login, key]) => [key, urls[login] ?? ''])),
			S3_BUCKET: name.replace('_', '-')
		},
		drop: () => asSuperuser(superuserUrl, [`drop database if exists "${name}" with (force)`])
	};
}

async function asSuperuser(url: string, statements: string[]): Promise<void> {
	const client = new pg.Client({ connectionString: url.replace(/\/[^/]*$/, '/postgres') });
	await client.connect();
	try {
		for (const statement of statements) await client.query(statement);
	} finally {
		await client.end();
	}
}

/**
 * A database for this test file, kept for looking at when a test of the file failed.
 * Use it inside tests and hooks: it is made before the first of them.
 */
export function useDatabase(): TestDatabase {
	let made: TestDatabase | undefined;
	const current = (): TestDatabase => {
		if (!made) throw new Error('The test database is there from the first hook or test on, not before.');
		return made;
	};
	beforeAll(async () => {
		made = await createDatabase();
	});
	afterAll(async ({}, suite) => {
		if (hasFailed(suite))
			console.error(`The database of the failed tests is kept while the run lasts: ${made?.name}`);
		else await made?.drop();
	});
	return {
		get name() {
			return current().name;
		},
		get env() {
			return current().env;
		},
		url: (login) => current().url(login),
		drop: () => current().drop()
	};
}

export function hasFailed(suite: Readonly<Pick<RunnerTestSuite, 'tasks'>>): boolean {
	return suite.tasks.some((task) =>
		task.type === 'suite' ? hasFailed(task) : task.result?.state === 'fail'
	);
}
