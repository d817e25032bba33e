import { existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { describe, expect, it, vi } from 'vitest';
import { DEMO_PASSWORD, DEMO_PEOPLE } from '../../src/lib/server/demo/lab/people';
import * as demo from '../../src/local/demo.js';
import { freePort, isAlive } from '../../src/local/processes.js';
import { processesIn, useCopy } from './launcher-copy';

// Starts are quick, but a machine that is busy with other suites need not be.
vi.setConfig({ testTimeout: 180_000 });

const start = ['node', 'src/local/start.js'];
const servicesOnly = [...start, '--services-only'];

const query = async (url: string, sql: string): Promise<Record<string, unknown>[]> => {
	const client = new pg.Client({ connectionString: url });
	await client.connect();
	try {
		return (await client.query<Record<string, unknown>>(sql)).rows;
	} finally {
		await client.end();
	}
};

describe('what a start says when it cannot', () => {
	const copy = useCopy();

	it('names the port that is in use and how to choose another', async () => {
		const other = createServer().listen(0, '127.0.0.1');
		await new Promise((resolve) => other.once('listening', resolve));
		const { port } = other.address() as AddressInfo;
		const run = copy.run(start, { PORT: String(port) });
		expect(await run.ended).toBe(1);
		expect(run.output()).toMatch(
			new RegExp(`^Port ${port} on 127.0.0.1 is in use by another program. .*PORT=\\d+ npm start\\n$`)
		);
		other.close();
	});

	it('says that a port must be a number', async () => {
		const run = copy.run(start, { PORT: 'eighty' });
		expect(await run.ended).toBe(1);
		expect(run.output()).toBe('PORT must be a whole number from 1 to 65534, not "eighty".\n');
	});

	it('says what to do where operators ask for a database that is not there', async () => {
		const run = copy.run(['node', 'src/local/admin.js', 'token', 'add']);
		expect(await run.ended).toBe(1);
		expect(run.output()).toMatch(/^Nothing runs here and there is no database yet: run npm start first/);
	});
});

describe('a private cluster', () => {
	const copy = useCopy();
	const at = (name: string) => path.join(copy.folder, '.local', name);

	it('that was cut off while being made is made anew', async () => {
		mkdirSync(at('cluster/data/base/1'), { recursive: true });
		writeFileSync(at('cluster/data/PG_VERSION'), '15\n');
		const run = copy.run(servicesOnly);
		await run.saying('Services run');
		expect(statSync(at('run.json')).mode & 0o777).toBe(0o600);
		expect(await query(copy.state().env.DATABASE_URL_OWNER!, 'select current_user as who')).toEqual([
			{ who: 'trunnion_owner' }
		]);
		run.child.kill('SIGINT');
		expect(await run.ended).toBe(130);
	});

	it('has the roles and rights that roles.sql gives on a server of someone else, on 127.0.0.1 only, never as root', async () => {
		const run = copy.run(servicesOnly);
		await run.saying('Services run');
		const kept = JSON.parse(readFileSync(at('cluster.json'), 'utf8')) as { superuserPassword: string };
		const superuser = new URL(copy.state().env.DATABASE_URL_OWNER!);
		superuser.username = 'postgres';
		superuser.password = kept.superuserPassword;
		const facts = async () => [
			await query(
				superuser.href,
				`select rolname, rolcanlogin, rolinherit, rolsuper, rolbypassrls, rolcreaterole, rolcreatedb, rolreplication,
				 array(select pg_get_userbyid(roleid)::text from pg_auth_members where member = r.oid order by 1) as member_of
				 from pg_roles r where rolname like 'trunnion%' order by rolname`
			),
			await query(
				superuser.href,
				`select datacl::text, pg_get_userbyid(datdba) as owner from pg_database where datname = 'trunnion'`
			)
		];
		const made = await facts();
		const attributes = (made[0] ?? []).map((role) => [
			role.rolname,
			role.rolcanlogin,
			role.rolinherit,
			role.member_of
		]);
		expect(attributes).toEqual([
			['trunnion_auth', true, true, []],
			['trunnion_client', true, true, []],
			['trunnion_lab', true, true, []],
			['trunnion_owner', true, false, ['trunnion_queue', 'trunnion_taken']],
			['trunnion_queue', true, true, []],
			['trunnion_taken', false, true, []]
		]);
		for (const role of made[0] ?? [])
			for (const power of ['rolsuper', 'rolbypassrls', 'rolcreaterole', 'rolcreatedb', 'rolreplication'])
				expect([role.rolname, power, role[power]]).toEqual([role.rolname, power, false]);

		const psql = copy.run(['psql', superuser.href, '-v', 'password=plain1', '-q', '-f', 'docker/roles.sql']);
		expect([await psql.ended, psql.output()]).toEqual([0, '']);
		expect(await facts()).toEqual(made);

		const settings = await query(
			superuser.href,
			"select name, setting from pg_settings where name in ('fsync', 'listen_addresses', 'unix_socket_directories') order by name"
		);
		expect(settings.map((row) => row.setting)).toEqual(['on', '127.0.0.1', '']);
		const stranger = new URL(copy.state().env.DATABASE_URL_LAB!);
		stranger.password = 'not-the-password';
		await expect(query(stranger.href, 'select 1')).rejects.toMatchObject({ code: '28P01' });
		expect(statSync(`/proc/${copy.state().processes.database!.pid}`).uid).not.toBe(0);
		run.child.kill('SIGTERM');
		expect(await run.ended).toBe(143);
	});

	it('whose passwords are lost is not made anew over its data', async () => {
		const kept = readFileSync(at('cluster.json'));
		rmSync(at('cluster.json'));
		const run = copy.run(servicesOnly);
		expect(await run.ended).toBe(1);
		expect(run.output()).toContain('holds data, but');
		writeFileSync(at('cluster.json'), kept, { mode: 0o600 });
		const again = copy.run(servicesOnly);
		await again.saying('Services run');
		again.child.kill('SIGTERM');
		await again.ended;
	});
});

describe('a start', () => {
	const copy = useCopy();

	it('gives operators a token alone, running or not, refuses a second, and leaves nothing on Ctrl-C', async () => {
		const port = String(await freePort());
		const run = copy.run(['npm', 'start'], { PORT: port });
		await run.saying('Started in');
		const state = copy.state();
		expect((await fetch(`${state.address}/api/v1/health`)).status).toBe(200);
		expect((await fetch(state.mailPage)).status).toBe(200);

		const second = copy.run(start, { PORT: String(await freePort()) });
		expect(await second.ended).toBe(1);
		expect(second.output()).toBe(
			`Trunnion runs already at ${state.address} (process ${state.launcher.pid}). Stop it with Ctrl-C where it was started, or: kill ${state.launcher.pid}\n`
		);
		expect(copy.state()).toEqual(state);

		const email = 'keeper@lab.example';
		const added = copy.run(
			['npm', 'run', 'admin', '--', 'user', 'add', '--email', email, '--name', 'Keeper', '--role', 'admin'],
			{ TRUNNION_PASSWORD: 'five plain words for a test' }
		);
		expect([await added.ended, added.output()]).toEqual([0, `${email} may sign in as admin.\n`]);
		const token = copy.run([
			'npm',
			'run',
			'admin',
			'--',
			'token',
			'add',
			'--email',
			email,
			'--label',
			'test'
		]);
		expect(await token.ended).toBe(0);
		expect(token.output()).toMatch(/^\S+\n$/);
		const clients = await fetch(`${state.address}/api/v1/clients`, {
			headers: { authorization: `Bearer ${token.output().trim()}` }
		});
		expect(clients.status).toBe(200);

		const parts = Object.values(state.processes);
		expect(parts.length).toBe(5);
		expect(parts.filter(isAlive)).toEqual(parts);
		process.kill(state.launcher.pid, 'SIGINT');
		await run.ended;
		expect(run.output()).toContain('Stopped.');
		expect(parts.filter(isAlive)).toEqual([]);
		expect(processesIn(copy.folder)).toEqual([]);
		expect(existsSync(path.join(copy.folder, '.local/run.json'))).toBe(false);

		const asleep = copy.run([
			'npm',
			'run',
			'admin',
			'--',
			'token',
			'add',
			'--email',
			email,
			'--label',
			'later'
		]);
		expect(await asleep.ended).toBe(0);
		expect(asleep.output()).toMatch(/^\S+\n$/);
		expect(processesIn(copy.folder)).toEqual([]);
	});

	it('that is killed outright takes all with it; the next one builds nothing anew', async () => {
		const run = copy.run(start, { PORT: String(await freePort()) });
		await run.saying('Started in');
		expect(run.output()).not.toMatch(/Building|Installing/);
		const parts = Object.values(copy.state().processes);
		run.child.kill('SIGKILL');
		await run.ended;
		for (let i = 0; i < 200 && parts.some(isAlive); i++) await sleep(50);
		expect(parts.filter(isAlive)).toEqual([]);
		const next = copy.run(servicesOnly);
		await next.saying('Services run');
		next.child.kill('SIGTERM');
		await next.ended;
	});

	it('ends when npm is told to, with all it started', async () => {
		const port = String(await freePort());
		const run = copy.run(['npm', 'start', '--', '--services-only'], { PORT: port });
		await run.saying('Services run');
		run.child.kill('SIGTERM');
		await run.ended;
		for (let i = 0; i < 100 && processesIn(copy.folder).length > 0; i++) await sleep(50);
		expect(processesIn(copy.folder)).toEqual([]);
	});

	it('stops the rest and says which when a part dies', async () => {
		const run = copy.run(servicesOnly);
		await run.saying('Services run');
		process.kill(copy.state().processes['object store']!.pid, 'SIGKILL');
		expect(await run.ended).toBe(1);
		expect(run.output()).toContain('The object store was ended by SIGKILL; stopping the rest.');
		expect(processesIn(copy.folder)).toEqual([]);
	});
});

it('names in its greeting the people that the demo laboratory has', () => {
	expect(demo.DEMO_PASSWORD).toBe(DEMO_PASSWORD);
	expect([...demo.DEMO_STAFF, ...demo.DEMO_CLIENTS]).toEqual(DEMO_PEOPLE.map(({ email }) => email));
});

it('is written with nothing but what Node.js brings, since it runs before the packages are there', () => {
	const folder = path.resolve(import.meta.dirname, '../../src/local');
	const seen = new Set<string>();
	const walk = (file: string): void => {
		if (seen.has(file)) return;
		seen.add(file);
		const imports = readFileSync(path.join(folder, file), 'utf8').matchAll(/^import [^;]*?from '([^']+)'/gm);
		for (const [, from] of imports) {
			if (from!.startsWith('./')) walk(from!.slice(2));
			else expect([file, from]).toEqual([file, expect.stringMatching(/^node:/)]);
		}
	};
	for (const entry of ['start.js', 'test.js', 'admin.js']) walk(entry);
	expect(seen.size).toBeGreaterThan(10);
});
