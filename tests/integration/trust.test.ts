import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { useDatabase } from '../setup/database';

/**
 * What row-level security promises, asked of the database itself: by its catalogue, and by being each login in turn.
 * Rows are planted by the superuser, past every policy.
 */
const database = useDatabase();
const connections: pg.Client[] = [];

async function connect(login: Parameters<typeof database.url>[0]): Promise<pg.Client> {
	const client = new pg.Client({ connectionString: database.url(login) });
	await client.connect();
	connections.push(client);
	return client;
}

let behind: pg.Client;
beforeAll(async () => {
	behind = await connect('superuser');
});
afterAll(async () => {
	await Promise.all(connections.map((client) => client.end()));
});

interface Table {
	name: string;
	enabled: boolean;
	forced: boolean;
	owned: boolean;
	clientPolicies: string[];
	clientMay: string[];
}

/** Every table of ours outside schema `auth` and the queue; `owned` = it has a client_id. */
async function tables(): Promise<Table[]> {
	const { rows } = await behind.query<Table>(`
		select c.relname as name, c.relrowsecurity as enabled, c.relforcerowsecurity as forced,
			exists (select from pg_attribute a where a.attrelid = c.oid and a.attname = 'client_id' and not a.attisdropped) as owned,
			coalesce((select array_agg(coalesce(pg_get_expr(p.polqual, p.polrelid), '') || ' / ' || coalesce(pg_get_expr(p.polwithcheck, p.polrelid), ''))
				from pg_policy p where p.polrelid = c.oid and 'trunnion_client'::regrole = any (p.polroles)), '{}') as "clientPolicies",
			array(select v from unnest(array['SELECT','INSERT','UPDATE','DELETE']) v
				where has_any_column_privilege('trunnion_client', c.oid, case v when 'DELETE' then 'SELECT' else v end)
				and (v <> 'DELETE' or has_table_privilege('trunnion_client', c.oid, 'DELETE'))) as "clientMay"
		from pg_class c where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p') and c.relname not like 'kysely_%'
		order by 1`);
	return rows;
}

/** Lab-owned by design: every client may read them, and they tell nothing of a client. */
const LAB_OWNED = new Set(['cell', 'fuel', 'cell_fuel', 'torque_chain']);

describe('the catalogue', () => {
	it('has row-level security enabled and forced, with a policy, on every table', async () => {
		const all = await tables();
		expect(all.length).toBeGreaterThan(20);
		const open = all.filter((table) => !table.enabled || !table.forced);
		expect(open.map((table) => table.name)).toEqual([]);
		const { rows } = await behind.query<{ name: string }>(
			`select c.relname as name from pg_class c where c.relnamespace = 'public'::regnamespace and c.relkind = 'r'
			and c.relname not like 'kysely_%' and not exists (select from pg_policy p where p.polrelid = c.oid)`
		);
		expect(rows).toEqual([]);
	});

	it('notices a new table without a policy', async () => {
		await behind.query('create table forgotten (id uuid, client_id uuid references client)');
		try {
			const forgotten = (await tables()).find((table) => table.name === 'forgotten');
			expect(forgotten).toMatchObject({ enabled: false, owned: true, clientPolicies: [] });
		} finally {
			await behind.query('drop table forgotten');
		}
	});

	it('lets a client at no table but by a policy on its own client or person', async () => {
		for (const table of await tables()) {
			if (!table.clientMay.length) continue;
			expect(table.clientPolicies, table.name).not.toEqual([]);
			for (const policy of table.clientPolicies)
				expect(policy, `${table.name}: ${policy}`).toMatch(/acting_client\(\)|acting_person\(\)/);
		}
	});

	it('gives a client no write beyond its bookings, numbers, follows, trail and request keys', async () => {
		const writable = (await tables()).filter((table) => table.clientMay.some((may) => may !== 'SELECT'));
		expect(writable.map((table) => `${table.name}: ${table.clientMay.join(' ')}`)).toEqual([
			'audit: SELECT INSERT',
			'booking: SELECT INSERT UPDATE',
			'counter: SELECT INSERT UPDATE',
			'follow: SELECT INSERT DELETE',
			'idempotency: SELECT INSERT UPDATE DELETE',
			'occupancy: SELECT DELETE'
		]);
	});

	it('ties children to parents of the same client by composite keys', async () => {
		// Foreign keys ignore row-level security, so a key on the id alone would accept a rival's parent.
		const { rows } = await behind.query<{ key: string }>(`
			select conrelid::regclass || '.' || conname as key from pg_constraint k
			where contype = 'f' and connamespace = 'public'::regnamespace
				and exists (select from pg_attribute a where a.attrelid = k.conrelid and a.attname = 'client_id')
				and exists (select from pg_attribute a where a.attrelid = k.confrelid and a.attname = 'client_id' and a.attnotnull)
				and not exists (select from pg_attribute a where a.attrelid = k.conrelid and a.attname = 'client_id' and a.attnum = any (k.conkey))`);
		expect(rows).toEqual([]);
	});

	it('has no function with its definer’s rights but the listed ones, each with a fixed search path', async () => {
		const { rows } = await behind.query<{ name: string; path: string | null }>(`
			select n.nspname || '.' || p.proname as name, array_to_string(p.proconfig, ' ') as path
			from pg_proc p join pg_namespace n on n.oid = p.pronamespace
			where p.prosecdef and n.nspname in ('public', 'auth', 'jobs') order by 1`);
		expect(rows.map((row) => row.name)).toEqual(['jobs.enqueue', 'jobs.workers_alive', 'public.taken']);
		for (const row of rows) expect(row.path, row.name).toMatch(/search_path=/);
	});

	it('keeps views from reading with their owner’s rights', async () => {
		const { rows } = await behind.query(
			`select relname from pg_class where relkind in ('v', 'm') and relnamespace in ('public'::regnamespace, 'auth'::regnamespace)`
		);
		expect(rows).toEqual([]);
	});
});

describe('each login', () => {
	const ids = {
		a: 'aaaaaaaa-0000-4000-8000-000000000001',
		b: 'bbbbbbbb-0000-4000-8000-000000000001',
		person: 'cccccccc-0000-4000-8000-000000000001',
		rival: 'cccccccc-0000-4000-8000-000000000002'
	};
	/** One row of client B in every table that a client may own, planted past the policies. */
	const planted: Record<string, string> = {};

	beforeAll(async () => {
		const { a, b, person, rival } = ids;
		await behind.query(`insert into client (id, code, name) values ('${a}', 'AA', 'A'), ('${b}', 'BB', 'B')`);
		await behind.query(`insert into auth.person (id, email, display_name, role, client_id) values
			('${person}', 'a@a.example', 'A', 'client', '${a}'), ('${rival}', 'b@b.example', 'B', 'client', '${b}')`);
		const one = async (text: string) =>
			(await behind.query<{ id: string }>(`${text} returning id`)).rows[0]!.id;
		const cell = await one(
			`insert into cell (code, name, absorber_kind, max_power_kw, max_torque_nm, max_speed_rpm) values ('C1', 'C', 'ac', 1, 1, 1)`
		);
		const fuel = await one(`insert into fuel (code, name) values ('F1', 'F')`);
		planted.fuel_batch = await one(
			`insert into fuel_batch (client_id, fuel_id, code) values ('${b}', '${fuel}', 'Q')`
		);
		planted.limit_set = await one(`insert into limit_set (client_id, code, title) values ('${b}', 'L', 'L')`);
		planted.limit_set_version = await one(
			`insert into limit_set_version (limit_set_id, version, rules) values ('${planted.limit_set}', 1, '[]')`
		);
		planted.engine = await one(
			`insert into engine (client_id, code, name, displacement_l, cylinders, strokes_per_cycle, ignition) values ('${b}', 'E', 'E', 1, 1, 4, 'spark')`
		);
		planted.build = await one(
			`insert into build (client_id, engine_id, number, title) values ('${b}', '${planted.engine}', 'B1', 'B')`
		);
		await behind.query(
			`insert into follow (client_id, build_id, person_id) values ('${b}', '${planted.build}', '${rival}')`
		);
		await behind.query(`insert into counter (client_id, kind, last) values ('${b}', 'R', 7)`);
		planted.booking =
			await one(`insert into booking (client_id, number, cell_id, build_id, during, requested_by) values
			('${b}', 'BB-B-0001', '${cell}', '${planted.build}', '[2026-01-01,2026-01-02)', '${rival}')`);
		planted.occupancy =
			await one(`insert into occupancy (cell_id, client_id, build_id, booking_id, kind, during) values
			('${cell}', '${b}', '${planted.build}', '${planted.booking}', 'booking', '[2026-01-01,2026-01-02)')`);
		planted.run =
			await one(`insert into run (client_id, number, build_id, cell_id, fuel_batch_id, kind, started_at, logged_by) values
			('${b}', 'BB-R-0001', '${planted.build}', '${cell}', '${planted.fuel_batch}', 'free_log', now(), '${rival}')`);
		planted.log_line = await one(
			`insert into log_line (client_id, run_id, at, text, author) values ('${b}', '${planted.run}', now(), 'x', '${rival}')`
		);
		planted.air_reading = await one(
			`insert into air_reading (client_id, run_id, at, barometer_kpa, author) values ('${b}', '${planted.run}', now(), 99, '${rival}')`
		);
		planted.checklist_entry =
			await one(`insert into checklist_entry (client_id, run_id, list_version, item, answer, at, author) values
			('${b}', '${planted.run}', 1, 'guards', 'done', now(), '${rival}')`);
		planted.trace =
			await one(`insert into trace (client_id, run_id, filename, sha256, size_bytes, object_key, uploaded_by) values
			('${b}', '${planted.run}', 'x', sha256('x'), 1, 'k', '${rival}')`);
		planted.reduction =
			await one(`insert into reduction (client_id, run_id, trace_id, method_version, settings, inputs, curve, points) values
			('${b}', '${planted.run}', '${planted.trace}', '1', '{}', '{}', '{}', '[]')`);
		planted.metric =
			await one(`insert into metric (client_id, run_id, reduction_id, code, value, unit, method) values
			('${b}', '${planted.run}', '${planted.reduction}', 'peak_power', 1, 'kW', 'm')`);
		planted.finding =
			await one(`insert into finding (client_id, trace_id, reduction_id, code, severity, message, spans) values
			('${b}', '${planted.trace}', '${planted.reduction}', 'gap', 'info', 'x', '[]')`);
		planted.flag = await one(
			`insert into flag (client_id, run_id, rule, severity, message, raised_by) values ('${b}', '${planted.run}', 'r', 'note', 'x', '${rival}')`
		);
		planted.attachment =
			await one(`insert into attachment (client_id, run_id, filename, content_type, sha256, size_bytes, object_key, added_by) values
			('${b}', '${planted.run}', 'x', 'x', sha256('x'), 1, 'k', '${rival}')`);
		planted.mail = await one(
			`insert into mail (client_id, kind, subject_id, recipient_id, subject, body) values ('${b}', 'k', '${planted.run}', '${rival}', 's', 'b')`
		);
		planted.audit = await one(`insert into audit (client_id, action, subject) values ('${b}', 'x', 'x')`);
		await behind.query(
			`insert into idempotency (person_id, key, route, body_sha256) values ('${rival}', 'k', 'r', sha256('x'))`
		);
	});

	it('has a planted row in every table that a client owns', async () => {
		for (const table of (await tables()).filter((each) => each.owned)) {
			const { rows } = await behind.query<{ n: number }>(
				`select count(*)::int as n from ${table.name} where client_id = '${ids.b}'`
			);
			expect(rows[0]!.n, table.name).toBeGreaterThan(0);
		}
	});

	/** Rows that this session reads from a table; a refusal counts as none. */
	async function rowsSeen(session: pg.Client, table: string): Promise<number> {
		try {
			const { rows } = await session.query<{ n: number }>(`select count(*)::int as n from ${table}`);
			return rows[0]!.n;
		} catch (error) {
			expect((error as pg.DatabaseError).code, `${table}: ${String(error)}`).toBe('42501');
			return 0;
		}
	}

	it.each(['client', 'auth', 'queue'] as const)(
		'%s, without a client set, sees no client row and changes none',
		async (login) => {
			const session = await connect(login);
			// Names of people as others see them, and of the client that someone belongs to.
			const may = new Set(login === 'auth' ? ['person', 'client'] : []);
			let asked = 0;
			for (const table of await tables()) {
				if (may.has(table.name)) continue;
				expect(await rowsSeen(session, table.name), `${login} reads ${table.name}`).toBe(0);
				asked++;
				for (const statement of [
					`delete from ${table.name}`,
					`update ${table.name} set ${table.owned ? 'client_id = client_id' : 'ctid = ctid'}`
				]) {
					const changed = await session.query(statement).then(
						(result) => result.rowCount ?? 0,
						() => 0
					);
					expect(changed, `${login}: ${statement}`).toBe(0);
				}
			}
			expect(asked).toBeGreaterThan(20);
		}
	);

	it('client A sees nothing of client B and can write nothing into B', async () => {
		const session = await connect('client');
		await session.query('begin');
		await session.query(`select set_config('app.client', $1, true), set_config('app.person', $2, true)`, [
			ids.a,
			ids.person
		]);
		for (const table of (await tables()).filter((each) => each.owned && !LAB_OWNED.has(each.name))) {
			await session.query('savepoint s');
			const rows = await session
				.query<{ client_id: string | null }>(`select client_id from ${table.name}`)
				.then(
					(result) => result.rows,
					async (error: pg.DatabaseError) => {
						expect(error.code).toBe('42501');
						await session.query('rollback to s');
						return [];
					}
				);
			expect(
				rows.filter((row) => row.client_id === ids.b),
				table.name
			).toEqual([]);
		}
		const writes = [
			`insert into counter (client_id, kind, last) values ('${ids.b}', 'X', 1)`,
			`insert into booking (client_id, number, cell_id, build_id, during, requested_by)
				select '${ids.b}', 'BB-B-0099', (select id from cell limit 1), '${planted.build}', '[2026-02-01,2026-02-02)', '${ids.person}'`,
			// A's own booking on B's build: the composite key refuses what the policy cannot see.
			`insert into booking (client_id, number, cell_id, build_id, during, requested_by)
				select '${ids.a}', 'AA-B-0099', (select id from cell limit 1), '${planted.build}', '[2026-02-01,2026-02-02)', '${ids.person}'`,
			`insert into audit (client_id, actor_id, action, subject) values ('${ids.b}', '${ids.person}', 'x', 'x')`,
			`insert into audit (client_id, actor_id, action, subject) values ('${ids.a}', '${ids.rival}', 'x', 'x')`,
			`select jobs.enqueue('mail.notify', '{"clientId":"${ids.b}"}', 'k', 0, 1, null)`
		];
		for (const write of writes) {
			await session.query('savepoint s');
			await expect(session.query(write), write).rejects.toMatchObject({
				code: expect.stringMatching(/^(42501|23503)$/)
			});
			await session.query('rollback to s');
		}
		const changed = await session.query(`update booking set purpose = 'mine'`);
		expect(changed.rowCount).toBe(0);
		const deleted = await session.query('delete from occupancy');
		expect(deleted.rowCount).toBe(0);
		await session.query('rollback');
	});

	it('tells a client of B’s slot only which cell is taken when', async () => {
		const session = await connect('client');
		const { rows, fields } = await session.query(`select * from taken('2025-12-31', '2026-01-03')`);
		expect(fields.map((field) => field.name)).toEqual(['cell_id', 'during']);
		expect(rows).toHaveLength(1);
	});

	it('forgets whom it acted for after COMMIT', async () => {
		const session = await connect('client');
		await session.query(`begin; select set_config('app.client', '${ids.b}', true); commit`);
		expect(await rowsSeen(session, 'run')).toBe(0);
	});

	it('the staff’s login cannot put one client’s batch or limit set under another’s run', async () => {
		const session = await connect('lab');
		await session.query(`begin; select set_config('app.person', '${ids.person}', true)`);
		const engine = await session.query<{
			id: string;
		}>(`insert into engine (client_id, code, name, displacement_l, cylinders, strokes_per_cycle, ignition)
			values ('${ids.a}', 'E', 'E', 1, 1, 4, 'spark') returning id`);
		const build = await session.query<{ id: string }>(`insert into build (client_id, engine_id, number, title)
			values ('${ids.a}', '${engine.rows[0]!.id}', 'B1', 'B') returning id`);
		const insert =
			session.query(`insert into run (client_id, number, build_id, cell_id, fuel_batch_id, kind, started_at, logged_by)
			select '${ids.a}', 'AA-R-0001', '${build.rows[0]!.id}', (select id from cell limit 1), '${planted.fuel_batch}', 'free_log', now(), '${ids.person}'`);
		await expect(insert).rejects.toMatchObject({ code: '42501' });
		await session.query('rollback');
	});

	it('no login of the application owns tables, bypasses security or may create roles', async () => {
		const { rows } = await behind.query(
			`select rolname from pg_roles where rolname like 'trunnion_%' and (rolsuper or rolbypassrls or rolcreaterole or rolcreatedb)`
		);
		expect(rows).toEqual([]);
		const owners = await behind.query(
			`select distinct tableowner from pg_tables where schemaname in ('public', 'auth')`
		);
		expect(owners.rows).toEqual([{ tableowner: 'trunnion_owner' }]);
	});
});

describe('passwords and sessions', () => {
	it('are reachable by the auth login alone', async () => {
		for (const login of ['lab', 'client', 'queue'] as const) {
			const session = await connect(login);
			for (const table of ['person', 'password', 'session', 'token'])
				await expect(
					session.query(`select from auth.${table}`),
					`${login} reads auth.${table}`
				).rejects.toMatchObject({ code: '42501' });
		}
	});
});
