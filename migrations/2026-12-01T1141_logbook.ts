import { sql, type Kysely } from 'kysely';

/** What is noted before and during a run: the pre-run checklist and readings of the air, both appended only; and what is declared. */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create table checklist_entry (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		list_version integer not null,
		item text not null check (length(item) between 1 and 60),
		answer text not null check (answer in ('done','not_applicable','not_done')),
		reason text check (length(reason) between 1 and 1000),
		author uuid not null references person,
		at timestamptz not null,
		created_at timestamptz not null default now(),
		constraint checklist_entry_run foreign key (client_id, run_id) references run (client_id, id),
		constraint checklist_entry_says_why check (answer <> 'not_applicable' or reason is not null)
	)`.execute(db);
	await sql`create index checklist_entry_run_id on checklist_entry (client_id, run_id, at)`.execute(db);

	await sql`create table air_reading (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		at timestamptz not null,
		barometer_kpa float8 check (barometer_kpa between 50 and 115),
		temperature_c float8 check (temperature_c between -60 and 70),
		humidity_pct float8 check (humidity_pct between 0 and 100),
		author uuid not null references person,
		supersedes_id uuid constraint air_reading_superseded_once unique,
		reason text check (length(reason) between 1 and 1000),
		created_at timestamptz not null default now(),
		constraint air_reading_key unique (client_id, id),
		constraint air_reading_run foreign key (client_id, run_id) references run (client_id, id),
		constraint air_reading_supersedes foreign key (client_id, supersedes_id) references air_reading (client_id, id),
		constraint air_reading_of_something check (num_nonnulls(barometer_kpa, temperature_c, humidity_pct) > 0),
		constraint air_reading_reason_when_superseding check (supersedes_id is null or reason is not null)
	)`.execute(db);
	await sql`create index air_reading_run_id on air_reading (client_id, run_id, at)`.execute(db);

	for (const table of ['checklist_entry', 'air_reading']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
		await sql`create policy lab on ${sql.table(table)} to trunnion_lab using (true) with check (true)`.execute(
			db
		);
		await sql`create policy own on ${sql.table(table)} for select to trunnion_client
			using (client_id = (select acting_client()))`.execute(db);
		await sql`grant select, insert on ${sql.table(table)} to trunnion_lab`.execute(db);
		await sql`grant select on ${sql.table(table)} to trunnion_client`.execute(db);
	}

	await sql`alter table run
		add column auxiliaries text[] not null default '{}',
		add column inlet_depression_kpa float8 check (inlet_depression_kpa between 0 and 50),
		add column exhaust_back_pressure_kpa float8 check (exhaust_back_pressure_kpa between 0 and 200)`.execute(db);
}
