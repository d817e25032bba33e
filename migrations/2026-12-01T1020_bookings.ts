import { sql, type Kysely } from 'kysely';

/**
 * Bookings, and the occupancy that makes a double booking impossible: one row per confirmed booking, hold or closure,
 * deleted when it ends; requests have none and overlap freely (refusing one would reveal a rival's).
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create table counter (
		client_id uuid not null references client,
		kind text not null,
		last integer not null,
		primary key (client_id, kind)
	)`.execute(db);

	await sql`create table booking (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		number text not null constraint booking_number_unique unique,
		cell_id uuid not null references cell,
		build_id uuid not null,
		fuel_batch_id uuid references fuel_batch,
		during tstzrange not null check (not isempty(during) and lower_inc(during) and not upper_inc(during)
			and not lower_inf(during) and not upper_inf(during)),
		state text not null default 'requested' check (state in ('requested','confirmed','declined','cancelled','done')),
		kind text,
		purpose text,
		rig_up_minutes integer,
		rig_down_minutes integer,
		replaces_id uuid,
		reason text,
		requested_by uuid not null references person,
		requested_at timestamptz not null default now(),
		decided_by uuid references person,
		decided_at timestamptz,
		calendar_sequence integer not null default 0,
		version integer not null default 1,
		constraint booking_key unique (client_id, id),
		constraint booking_build foreign key (client_id, build_id) references build (client_id, id),
		constraint booking_replaces foreign key (client_id, replaces_id) references booking (client_id, id),
		constraint booking_confirmed_has_rig check (state <> 'confirmed' or (rig_up_minutes is not null and rig_down_minutes is not null))
	)`.execute(db);
	await sql`create index booking_client_from on booking (client_id, lower(during) desc)`.execute(db);
	await sql`create index booking_build_id on booking (client_id, build_id)`.execute(db);
	await sql`create index booking_from on booking (lower(during) desc)`.execute(db);
	// One open request at a time asks to move a slot.
	await sql`create unique index booking_one_open_move on booking (replaces_id) where state = 'requested'`.execute(
		db
	);

	await sql`create table occupancy (
		id uuid primary key default gen_random_uuid(),
		cell_id uuid not null references cell,
		client_id uuid references client,
		build_id uuid,
		booking_id uuid constraint occupancy_booking_unique unique,
		kind text not null check (kind in ('booking','hold','closure')),
		title text,
		during tstzrange not null check (not isempty(during) and lower_inc(during) and not upper_inc(during)),
		constraint occupancy_build foreign key (client_id, build_id) references build (client_id, id),
		constraint occupancy_booking foreign key (client_id, booking_id) references booking (client_id, id),
		constraint occupancy_client_by_kind check ((kind = 'closure') = (client_id is null)),
		constraint occupancy_cell_no_overlap exclude using gist (cell_id with =, during with &&),
		constraint occupancy_build_no_overlap exclude using gist (build_id with =, during with &&)
	)`.execute(db);

	const batchFits = sql`(fuel_batch_id is null or exists (select from fuel_batch b where b.id = fuel_batch_id
		and (b.client_id is null or b.client_id = booking.client_id)))`;
	for (const table of ['counter', 'booking', 'occupancy']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
		await sql`grant select, insert, update on ${sql.table(table)} to trunnion_lab`.execute(db);
	}
	await sql`create policy lab on counter to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`create policy own on counter to trunnion_client
		using (client_id = (select acting_client())) with check (client_id = (select acting_client()))`.execute(db);
	await sql`grant select, insert, update on counter to trunnion_client`.execute(db);

	await sql`create policy lab on booking to trunnion_lab using (true) with check (${batchFits})`.execute(db);
	await sql`create policy own on booking to trunnion_client
		using (client_id = (select acting_client())) with check (client_id = (select acting_client()) and ${batchFits})`.execute(
		db
	);
	await sql`grant select, insert, update on booking to trunnion_client`.execute(db);

	await sql`create policy lab on occupancy to trunnion_lab using (true) with check (true)`.execute(db);
	await sql`grant delete on occupancy to trunnion_lab`.execute(db);
	await sql`create policy own on occupancy for select to trunnion_client using (client_id = (select acting_client()))`.execute(
		db
	);
	// A closure is the lab's own and tells nothing of a rival; its title stays with the staff.
	await sql`create policy closed on occupancy for select to trunnion_client
		using (kind = 'closure' and (select acting_client()) is not null)`.execute(db);
	await sql`create policy own_end on occupancy for delete to trunnion_client using (client_id = (select acting_client()))`.execute(
		db
	);
	await sql`grant select, delete on occupancy to trunnion_client`.execute(db);

	// "Taken" across clients: a cell and a time, nothing else, through a role that may select just those columns.
	await sql`create policy taken on occupancy for select to trunnion_taken using (true)`.execute(db);
	await sql`grant select (cell_id, during) on occupancy to trunnion_taken`.execute(db);
	await sql`create function taken(from_at timestamptz, to_at timestamptz) returns table (cell_id uuid, during tstzrange)
		language sql stable security definer set search_path = pg_catalog, public
		as $$ select o.cell_id, o.during from public.occupancy o where o.during && tstzrange(from_at, to_at) $$`.execute(
		db
	);
	await sql`grant create on schema public to trunnion_taken`.execute(db);
	await sql`alter function taken(timestamptz, timestamptz) owner to trunnion_taken`.execute(db);
	await sql`revoke create on schema public from trunnion_taken`.execute(db);
	await sql`revoke all on function taken(timestamptz, timestamptz) from public`.execute(db);
	await sql`grant execute on function taken(timestamptz, timestamptz) to trunnion_lab, trunnion_client`.execute(
		db
	);
}
