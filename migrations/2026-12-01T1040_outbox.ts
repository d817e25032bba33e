import { sql, type Kysely } from 'kysely';

/** Mail that is promised (composed and sent by the worker from a job that the causing transaction enqueued), the trail of who did what, remembered answers to repeated requests, and the door to the job queue. */
export async function up(db: Kysely<any>): Promise<void> {
	// The address is looked up, and the recipient's right to the content checked again, when it is sent.
	await sql`create table mail (
		id uuid primary key default gen_random_uuid(),
		client_id uuid references client,
		kind text not null,
		subject_id uuid not null,
		revision integer not null default 0,
		recipient_id uuid not null references person,
		subject text not null check (subject !~ '[\r\n]'),
		body text not null,
		calendar text,
		calendar_method text check (calendar_method in ('REQUEST','CANCEL')),
		created_at timestamptz not null default now(),
		sent_at timestamptz,
		dropped_reason text,
		constraint mail_once unique (kind, subject_id, revision, recipient_id)
	)`.execute(db);
	await sql`create index mail_client on mail (client_id)`.execute(db);

	await sql`create table audit (
		id uuid primary key default gen_random_uuid(),
		client_id uuid references client,
		at timestamptz not null default now(),
		actor_id uuid references person,
		action text not null,
		subject text not null,
		subject_id uuid,
		before jsonb,
		after jsonb
	)`.execute(db);
	await sql`create index audit_subject on audit (subject, subject_id, at)`.execute(db);
	await sql`create index audit_client on audit (client_id, at)`.execute(db);

	await sql`create table idempotency (
		person_id uuid not null references person,
		key text not null check (length(key) between 1 and 200),
		route text not null,
		body_sha256 bytea not null,
		status smallint,
		answer jsonb,
		created_at timestamptz not null default now(),
		primary key (person_id, key)
	)`.execute(db);

	for (const table of ['mail', 'audit', 'idempotency']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
	}
	await sql`create policy lab on mail to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`grant select, insert on mail to trunnion_lab`.execute(db);
	await sql`grant update (sent_at, dropped_reason) on mail to trunnion_lab`.execute(db);

	await sql`create policy lab on audit to trunnion_lab using (true) with check (actor_id is not distinct from (select acting_person()))`.execute(
		db
	);
	await sql`create policy own on audit for select to trunnion_client using (client_id = (select acting_client()))`.execute(
		db
	);
	await sql`create policy own_write on audit for insert to trunnion_client
		with check (client_id = (select acting_client()) and actor_id = (select acting_person()))`.execute(db);
	await sql`create policy auth on audit for insert to trunnion_auth with check (true)`.execute(db);
	await sql`grant select, insert on audit to trunnion_lab, trunnion_client`.execute(db);
	await sql`grant insert on audit to trunnion_auth`.execute(db);

	await sql`create policy own on idempotency to trunnion_lab, trunnion_client
		using (person_id = (select acting_person())) with check (person_id = (select acting_person()))`.execute(db);
	await sql`grant select, insert, update, delete on idempotency to trunnion_lab, trunnion_client`.execute(db);

	// The queue's tables belong to trunnion_queue; others add jobs through this one door, inside their own transaction.
	// A client's login can only ever enqueue work for the client it acts for.
	await sql`create schema jobs`.execute(db);
	await sql`create function jobs.enqueue(task text, payload json, key text, job_priority integer, attempts integer, at timestamptz)
		returns void language plpgsql security definer set search_path = pg_catalog as $$
		begin
			if session_user = 'trunnion_client'
				and (payload ->> 'clientId') is distinct from nullif(current_setting('app.client', true), '') then
				raise exception 'a client may enqueue work for itself only' using errcode = '42501';
			end if;
			perform graphile_worker.add_job(task, payload, run_at => at, max_attempts => attempts, job_key => key, priority => job_priority);
		end $$`.execute(db);
	await sql`grant usage on schema jobs to trunnion_lab, trunnion_client, trunnion_auth, trunnion_queue`.execute(
		db
	);
	await sql`grant create on schema jobs to trunnion_queue`.execute(db);
	await sql`alter function jobs.enqueue(text, json, text, integer, integer, timestamptz) owner to trunnion_queue`.execute(
		db
	);
	await sql`revoke create on schema jobs from trunnion_queue`.execute(db);
	await sql`revoke all on function jobs.enqueue(text, json, text, integer, integer, timestamptz) from public`.execute(
		db
	);
	await sql`grant execute on function jobs.enqueue(text, json, text, integer, integer, timestamptz)
		to trunnion_lab, trunnion_client, trunnion_auth`.execute(db);

	// Workers say that they live; health reads how many did lately, and a dead one's jobs are taken from it at once.
	await sql`create table jobs.worker (
		id text primary key,
		seen_at timestamptz not null default now()
	)`.execute(db);
	await sql`grant select, insert, update, delete on jobs.worker to trunnion_queue`.execute(db);
	await sql`create function jobs.workers_alive(within_s integer) returns bigint language sql stable security definer
		set search_path = pg_catalog
		as $$ select count(*) from jobs.worker where seen_at > now() - make_interval(secs => within_s) $$`.execute(
		db
	);
	await sql`revoke all on function jobs.workers_alive(integer) from public`.execute(db);
	await sql`grant execute on function jobs.workers_alive(integer) to trunnion_lab`.execute(db);
}
