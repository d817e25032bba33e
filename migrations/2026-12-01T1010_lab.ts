import { sql, type Kysely } from 'kysely';

/** What a run is made with: cells and fuels of the lab; batches and limit sets of the lab or of a client; engines and builds of a client. */
export async function up(db: Kysely<any>): Promise<void> {
	const code = sql`text not null check (code ~ '^[A-Z0-9][A-Z0-9.-]{0,31}$')`;

	await sql`create table cell (
		id uuid primary key default gen_random_uuid(),
		code ${code} constraint cell_code_unique unique,
		name text not null,
		absorber_kind text not null check (absorber_kind in ('eddy_current','water_brake','ac','dc','hydraulic')),
		max_power_kw float8 not null check (max_power_kw > 0),
		max_torque_nm float8 not null check (max_torque_nm > 0),
		max_speed_rpm float8 not null check (max_speed_rpm > 0),
		envelope jsonb,
		torque_at text not null default 'flange' check (torque_at in ('flange','stator')),
		rotor_inertia_kg_m2 float8 check (rotor_inertia_kg_m2 >= 0),
		shaft_inertia_kg_m2 float8 check (shaft_inertia_kg_m2 >= 0),
		rig_up_minutes integer not null default 0 check (rig_up_minutes between 0 and 10080),
		rig_down_minutes integer not null default 0 check (rig_down_minutes between 0 and 10080),
		opening_hours jsonb,
		colour smallint not null default 0,
		version integer not null default 1,
		created_at timestamptz not null default now()
	)`.execute(db);

	await sql`create table fuel (
		id uuid primary key default gen_random_uuid(),
		code ${code} constraint fuel_code_unique unique,
		name text not null,
		components jsonb,
		created_at timestamptz not null default now()
	)`.execute(db);
	await sql`create table cell_fuel (
		cell_id uuid not null references cell,
		fuel_id uuid not null references fuel,
		primary key (cell_id, fuel_id)
	)`.execute(db);

	await sql`create table fuel_batch (
		id uuid primary key default gen_random_uuid(),
		client_id uuid references client,
		fuel_id uuid not null references fuel,
		code ${code},
		properties jsonb not null default '{}',
		version integer not null default 1,
		created_at timestamptz not null default now(),
		constraint fuel_batch_code_unique unique nulls not distinct (client_id, code)
	)`.execute(db);

	await sql`create table limit_set (
		id uuid primary key default gen_random_uuid(),
		client_id uuid references client,
		code ${code},
		title text not null,
		created_at timestamptz not null default now(),
		constraint limit_set_code_unique unique nulls not distinct (client_id, code)
	)`.execute(db);
	// client_id again on the version, so that its policy needs no join; a trigger copies it from the set.
	await sql`create table limit_set_version (
		id uuid primary key default gen_random_uuid(),
		client_id uuid references client,
		limit_set_id uuid not null references limit_set,
		version integer not null,
		rules jsonb not null,
		in_force_from timestamptz not null default now(),
		created_by uuid references person,
		created_at timestamptz not null default now(),
		constraint limit_set_version_unique unique (limit_set_id, version)
	)`.execute(db);
	await sql`create function limit_set_version_client() returns trigger language plpgsql as $$
		begin
			select s.client_id into strict new.client_id from public.limit_set s where s.id = new.limit_set_id;
			return new;
		end $$`.execute(db);
	await sql`create trigger limit_set_version_client before insert on limit_set_version
		for each row execute function limit_set_version_client()`.execute(db);

	await sql`create table engine (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		code ${code},
		name text not null,
		displacement_l float8 not null check (displacement_l > 0),
		cylinders integer not null check (cylinders > 0),
		strokes_per_cycle smallint not null check (strokes_per_cycle in (2, 4)),
		ignition text not null check (ignition in ('spark','compression')),
		induction text check (induction in ('natural','mechanical','turbo','turbo_cooled')),
		inertia_kg_m2 float8 check (inertia_kg_m2 >= 0),
		bore_mm float8 check (bore_mm > 0),
		stroke_mm float8 check (stroke_mm > 0),
		compression_ratio float8 check (compression_ratio > 1),
		max_speed_rpm float8 check (max_speed_rpm > 0),
		expected_torque jsonb,
		version integer not null default 1,
		created_at timestamptz not null default now(),
		constraint engine_code_unique unique (client_id, code),
		constraint engine_key unique (client_id, id),
		constraint engine_compression_needs_induction check (ignition = 'spark' or induction is not null)
	)`.execute(db);

	await sql`create table build (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		engine_id uuid not null,
		parent_id uuid,
		number text not null check (number ~ '^[A-Z0-9][A-Z0-9.-]{0,31}$'),
		title text not null,
		parts jsonb not null default '[]',
		state text not null default 'in_preparation' check (state in ('in_preparation','ready','retired')),
		version integer not null default 1,
		created_at timestamptz not null default now(),
		constraint build_number_unique unique (client_id, number),
		constraint build_key unique (client_id, id),
		constraint build_engine foreign key (client_id, engine_id) references engine (client_id, id),
		constraint build_parent foreign key (client_id, parent_id) references build (client_id, id),
		constraint build_not_own_parent check (parent_id <> id)
	)`.execute(db);
	await sql`create index build_engine_id on build (client_id, engine_id)`.execute(db);
	await sql`create index build_parent_id on build (client_id, parent_id)`.execute(db);

	await sql`create table follow (
		client_id uuid not null references client,
		build_id uuid not null,
		person_id uuid not null references person,
		created_at timestamptz not null default now(),
		primary key (build_id, person_id),
		constraint follow_build foreign key (client_id, build_id) references build (client_id, id)
	)`.execute(db);

	const tables = [
		'cell',
		'fuel',
		'cell_fuel',
		'fuel_batch',
		'limit_set',
		'limit_set_version',
		'engine',
		'build',
		'follow'
	];
	for (const table of tables) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
		await sql`create policy lab on ${sql.table(table)} to trunnion_lab using (true) with check (true)`.execute(
			db
		);
		await sql`grant select, insert, update on ${sql.table(table)} to trunnion_lab`.execute(db);
		await sql`grant select on ${sql.table(table)} to trunnion_client`.execute(db);
	}
	await sql`grant delete on cell_fuel, follow to trunnion_lab`.execute(db);
	for (const table of ['cell', 'fuel', 'cell_fuel'])
		await sql`create policy lab_owned on ${sql.table(table)} for select to trunnion_client
			using ((select acting_client()) is not null)`.execute(db);
	for (const table of ['fuel_batch', 'limit_set', 'limit_set_version'])
		await sql`create policy own_or_lab on ${sql.table(table)} for select to trunnion_client
			using ((select acting_client()) is not null and (client_id is null or client_id = (select acting_client())))`.execute(
			db
		);
	for (const table of ['engine', 'build'])
		await sql`create policy own on ${sql.table(table)} for select to trunnion_client
			using (client_id = (select acting_client()))`.execute(db);
	await sql`create policy own on follow to trunnion_client
		using (client_id = (select acting_client()) and person_id = (select acting_person()))
		with check (client_id = (select acting_client()) and person_id = (select acting_person()))`.execute(db);
	await sql`grant insert, delete on follow to trunnion_client`.execute(db);
}
