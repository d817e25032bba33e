import { sql, type Kysely } from 'kysely';

/** Attachments of fuel batches too, of which some are the lab's own; put aside with a reason, once, and never deleted. */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`alter table attachment
		alter column client_id drop not null,
		add column fuel_batch_id uuid references fuel_batch,
		add column removed_at timestamptz,
		add column removed_by uuid references person,
		add column removed_reason text check (length(removed_reason) between 1 and 1000),
		drop constraint attachment_of_one,
		add constraint attachment_of_one check (num_nonnulls(run_id, build_id, fuel_batch_id) = 1),
		-- A composite key with a null in it checks nothing: only a batch may be the lab's.
		add constraint attachment_of_client check (client_id is not null or fuel_batch_id is not null),
		add constraint attachment_removed_by_whom check (num_nonnulls(removed_at, removed_by, removed_reason) in (0, 3))`.execute(
		db
	);
	await sql`create index attachment_fuel_batch_id on attachment (fuel_batch_id) where fuel_batch_id is not null`.execute(
		db
	);

	await sql`drop policy lab on attachment`.execute(db);
	await sql`create policy lab on attachment to trunnion_lab using (true)
		with check (fuel_batch_id is null or exists (select from fuel_batch b
			where b.id = fuel_batch_id and b.client_id is not distinct from attachment.client_id))`.execute(db);
	await sql`drop policy own on attachment`.execute(db);
	// What staff put aside, perhaps because it was another's, a client sees no more.
	await sql`create policy own_or_lab on attachment for select to trunnion_client
		using ((select acting_client()) is not null and removed_at is null
			and (client_id is null or client_id = (select acting_client())))`.execute(db);
	await sql`create policy removed_once on attachment as restrictive for update to trunnion_lab
		using (removed_at is null) with check (true)`.execute(db);
	await sql`grant update (removed_at, removed_by, removed_reason) on attachment to trunnion_lab`.execute(db);
}
