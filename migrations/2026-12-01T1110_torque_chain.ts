import { sql, type Kysely } from 'kysely';

/**
 * The torque chain of a cell as dated versions: appended, never edited away. What the cell's own columns held becomes its
 * first version.
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create table torque_chain (
		id uuid primary key default gen_random_uuid(),
		cell_id uuid not null references cell,
		version integer not null check (version > 0),
		torque_at text not null check (torque_at in ('flange','stator')),
		arm_m float8 check (arm_m > 0),
		gravity_mps2 float8 check (gravity_mps2 between 9.7 and 9.9),
		gear_ratio float8 check (gear_ratio > 0),
		gear_efficiency float8 check (gear_efficiency > 0 and gear_efficiency <= 1),
		rotor_inertia_kg_m2 float8 check (rotor_inertia_kg_m2 >= 0),
		shaft_inertia_kg_m2 float8 check (shaft_inertia_kg_m2 >= 0),
		-- Null: from the beginning, as the first version is.
		valid_from timestamptz check ((valid_from is null) = (version = 1)),
		reason text not null check (length(reason) between 1 and 1000),
		created_by uuid references person,
		created_at timestamptz not null default now(),
		constraint torque_chain_version unique (cell_id, version),
		constraint torque_chain_gear_whole check ((gear_ratio is null) = (gear_efficiency is null))
	)`.execute(db);

	// Forced row-level security hides the cells from their owner too.
	await sql`create policy back_fill on cell for select to current_user using (true)`.execute(db);
	await sql`insert into torque_chain
			(cell_id, version, torque_at, rotor_inertia_kg_m2, shaft_inertia_kg_m2, reason, created_at)
		select id, 1, torque_at, rotor_inertia_kg_m2, shaft_inertia_kg_m2, 'As first recorded with the cell', created_at
		from cell`.execute(db);
	await sql`drop policy back_fill on cell`.execute(db);
	await sql`alter table cell drop column torque_at, drop column rotor_inertia_kg_m2, drop column shaft_inertia_kg_m2`.execute(
		db
	);

	await sql`alter table torque_chain enable row level security`.execute(db);
	await sql`alter table torque_chain force row level security`.execute(db);
	await sql`create policy lab on torque_chain to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`grant select, insert on torque_chain to trunnion_lab`.execute(db);
	await sql`create policy lab_owned on torque_chain for select to trunnion_client
		using ((select acting_client()) is not null)`.execute(db);
	// Why it was changed and by whom is the lab's own affair: the words may name another client's test.
	await sql`grant select (id, cell_id, version, torque_at, arm_m, gravity_mps2, gear_ratio, gear_efficiency,
		rotor_inertia_kg_m2, shaft_inertia_kg_m2, valid_from, created_at) on torque_chain to trunnion_client`.execute(
		db
	);

	// Which runs a version reaches is asked by cell and time.
	await sql`create index run_cell_started on run (cell_id, started_at)`.execute(db);
}
