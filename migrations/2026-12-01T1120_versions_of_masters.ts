import { sql, type Kysely } from 'kysely';

/**
 * What an engine and a fuel batch were recorded as, version by version, written by the database itself: whoever changes one
 * leaves behind what earlier figures were computed with. And what a fuel should be, to hold its batches against.
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`alter table fuel
		add column version integer not null default 1,
		add column specification jsonb not null default '{}'`.execute(db);

	await sql`create table engine_version (
		client_id uuid not null references client,
		engine_id uuid not null,
		version integer not null,
		facts jsonb not null,
		created_by uuid references person,
		created_at timestamptz not null default now(),
		primary key (engine_id, version),
		constraint engine_version_engine foreign key (client_id, engine_id) references engine (client_id, id)
	)`.execute(db);
	await sql`create table fuel_batch_version (
		client_id uuid references client,
		fuel_batch_id uuid not null references fuel_batch,
		version integer not null,
		properties jsonb not null,
		created_by uuid references person,
		created_at timestamptz not null default now(),
		primary key (fuel_batch_id, version)
	)`.execute(db);

	const facts = (row: string) => sql`jsonb_build_object(
		'displacementL', ${sql.ref(`${row}.displacement_l`)}, 'cylinders', ${sql.ref(`${row}.cylinders`)},
		'strokesPerCycle', ${sql.ref(`${row}.strokes_per_cycle`)}, 'ignition', ${sql.ref(`${row}.ignition`)},
		'induction', ${sql.ref(`${row}.induction`)}, 'inertiaKgM2', ${sql.ref(`${row}.inertia_kg_m2`)},
		'boreMm', ${sql.ref(`${row}.bore_mm`)}, 'strokeMm', ${sql.ref(`${row}.stroke_mm`)},
		'compressionRatio', ${sql.ref(`${row}.compression_ratio`)}, 'maxSpeedRpm', ${sql.ref(`${row}.max_speed_rpm`)},
		'expectedTorque', ${sql.ref(`${row}.expected_torque`)})`;

	// Forced row-level security hides the rows from their owner too.
	for (const table of ['engine', 'fuel_batch'])
		await sql`create policy back_fill on ${sql.table(table)} for select to current_user using (true)`.execute(
			db
		);
	await sql`insert into engine_version (client_id, engine_id, version, facts, created_at)
		select e.client_id, e.id, e.version, ${facts('e')}, e.created_at from engine e`.execute(db);
	await sql`insert into fuel_batch_version (client_id, fuel_batch_id, version, properties, created_at)
		select b.client_id, b.id, b.version, b.properties, b.created_at from fuel_batch b`.execute(db);
	for (const table of ['engine', 'fuel_batch'])
		await sql`drop policy back_fill on ${sql.table(table)}`.execute(db);

	await sql`create function engine_keeps_version() returns trigger language plpgsql as $$
		begin
			insert into public.engine_version (client_id, engine_id, version, facts, created_by)
				values (new.client_id, new.id, new.version, ${facts('new')}, public.acting_person());
			return null;
		end $$`.execute(db);
	await sql`create trigger engine_keeps_version after insert or update of version on engine
		for each row execute function engine_keeps_version()`.execute(db);
	await sql`create function fuel_batch_keeps_version() returns trigger language plpgsql as $$
		begin
			insert into public.fuel_batch_version (client_id, fuel_batch_id, version, properties, created_by)
				values (new.client_id, new.id, new.version, new.properties, public.acting_person());
			return null;
		end $$`.execute(db);
	await sql`create trigger fuel_batch_keeps_version after insert or update of version on fuel_batch
		for each row execute function fuel_batch_keeps_version()`.execute(db);

	for (const table of ['engine_version', 'fuel_batch_version']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
		await sql`grant select, insert on ${sql.table(table)} to trunnion_lab`.execute(db);
		await sql`grant select on ${sql.table(table)} to trunnion_client`.execute(db);
	}
	await sql`create policy lab on engine_version to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`create policy own on engine_version for select to trunnion_client
		using (client_id = (select acting_client()))`.execute(db);
	await sql`create policy lab on fuel_batch_version to trunnion_lab using (true)
		with check (exists (select from fuel_batch b
			where b.id = fuel_batch_id and b.client_id is not distinct from fuel_batch_version.client_id))`.execute(db);
	await sql`create policy own_or_lab on fuel_batch_version for select to trunnion_client
		using ((select acting_client()) is not null and (client_id is null or client_id = (select acting_client())))`.execute(
		db
	);
}
