import { sql, type Kysely } from 'kysely';

/**
 * Schemas, clients and people.
 *
 * Logins (made by the launcher, since roles are cluster-wide): trunnion_owner runs migrations only; trunnion_lab serves staff
 * (policy `true`); trunnion_client serves clients (policy: own client only); trunnion_auth alone reaches schema `auth`;
 * trunnion_queue owns the job queue; trunnion_taken may see nothing but which cell is taken when.
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create extension if not exists btree_gist`.execute(db);
	await sql`grant usage on schema public to trunnion_lab, trunnion_client, trunnion_auth, trunnion_queue, trunnion_taken`.execute(
		db
	);

	// The person and the client a transaction acts for. After COMMIT a local setting reads '' and not NULL, hence nullif.
	await sql`create function acting_client() returns uuid language sql stable parallel safe
		as $$ select nullif(current_setting('app.client', true), '')::uuid $$`.execute(db);
	await sql`create function acting_person() returns uuid language sql stable parallel safe
		as $$ select nullif(current_setting('app.person', true), '')::uuid $$`.execute(db);

	await sql`create table client (
		id uuid primary key default gen_random_uuid(),
		code text not null constraint client_code_unique unique
			check (code ~ '^[A-Z0-9][A-Z0-9.-]{0,31}$'),
		name text not null check (length(name) between 1 and 200),
		created_at timestamptz not null default now()
	)`.execute(db);

	// Names of people as others see them; kept in step with auth.person by a trigger there.
	await sql`create table person (
		id uuid primary key,
		client_id uuid references client,
		display_name text not null,
		role text not null check (role in ('admin','manager','engineer','builder','operator','client')),
		active boolean not null,
		constraint person_client_by_role check ((role = 'client') = (client_id is not null))
	)`.execute(db);
	await sql`create index person_client on person (client_id)`.execute(db);

	for (const table of ['client', 'person']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
	}
	await sql`create policy lab on client to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`create policy own on client for select to trunnion_client using (id = (select acting_client()))`.execute(
		db
	);
	await sql`grant select, insert, update on client to trunnion_lab`.execute(db);
	await sql`grant select on client to trunnion_client`.execute(db);

	await sql`create policy lab on person for select to trunnion_lab using (true)`.execute(db);
	// A client knows its own people and the names of staff it deals with; role and standing of others are not its business.
	await sql`create policy own on person for select to trunnion_client
		using (acting_client() is not null and (client_id is null or client_id = (select acting_client())))`.execute(
		db
	);
	await sql`create policy auth on person to trunnion_auth using (true) with check (true)`.execute(db);
	await sql`grant select on person to trunnion_lab`.execute(db);
	await sql`grant select (id, client_id, display_name) on person to trunnion_client`.execute(db);
	await sql`grant select, insert, update on person to trunnion_auth`.execute(db);

	await sql`create schema auth`.execute(db);
	await sql`grant usage on schema auth to trunnion_auth`.execute(db);
	await sql`create table auth.person (
		id uuid primary key default gen_random_uuid(),
		email text not null constraint person_email_unique unique check (email = lower(email) and length(email) <= 254),
		display_name text not null check (length(display_name) between 1 and 120),
		role text not null check (role in ('admin','manager','engineer','builder','operator','client')),
		client_id uuid references client,
		units text not null default 'si' check (units in ('si', 'us')),
		disabled_at timestamptz,
		created_at timestamptz not null default now(),
		constraint person_client_by_role check ((role = 'client') = (client_id is not null))
	)`.execute(db);
	// Apart from the person: the session library reads whole person rows, and a hash must never travel with them.
	await sql`create table auth.password (
		person_id uuid primary key references auth.person,
		hash text not null,
		changed_at timestamptz not null default now()
	)`.execute(db);
	await sql`create table auth.session (
		id text primary key,
		user_id uuid not null references auth.person,
		expires_at timestamptz not null,
		created_at timestamptz not null default now(),
		user_agent text
	)`.execute(db);
	await sql`create index session_user_id on auth.session (user_id)`.execute(db);
	await sql`create table auth.token (
		id uuid primary key default gen_random_uuid(),
		person_id uuid not null references auth.person,
		label text not null check (length(label) between 1 and 80),
		secret_sha256 bytea not null check (length(secret_sha256) = 32),
		created_at timestamptz not null default now(),
		last_used_at timestamptz,
		revoked_at timestamptz
	)`.execute(db);
	await sql`create index token_person on auth.token (person_id)`.execute(db);
	for (const table of ['invitation', 'reset'])
		await sql`create table ${sql.table(`auth.${table}`)} (
			id uuid primary key default gen_random_uuid(),
			person_id uuid not null references auth.person,
			secret_sha256 bytea not null check (length(secret_sha256) = 32),
			expires_at timestamptz not null,
			used_at timestamptz,
			created_at timestamptz not null default now()
		)`.execute(db);
	// Shape of rate-limiter-flexible's PostgreSQL store.
	await sql`create table auth.throttle (
		key varchar(255) primary key,
		points integer not null default 0,
		expire bigint
	)`.execute(db);
	for (const table of ['person', 'password', 'session', 'token', 'invitation', 'reset', 'throttle'])
		await sql`grant select, insert, update, delete on ${sql.table(`auth.${table}`)} to trunnion_auth`.execute(
			db
		);

	await sql`create function auth.mirror_person() returns trigger language plpgsql as $$
		begin
			insert into public.person (id, client_id, display_name, role, active)
			values (new.id, new.client_id, new.display_name, new.role, new.disabled_at is null)
			on conflict (id) do update set client_id = excluded.client_id, display_name = excluded.display_name,
				role = excluded.role, active = excluded.active;
			return new;
		end $$`.execute(db);
	await sql`create trigger mirror_person after insert or update on auth.person
		for each row execute function auth.mirror_person()`.execute(db);
}
