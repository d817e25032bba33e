import { sql, type Kysely } from 'kysely';

/** What invitations, resets and the administration of people need beside the tables that are there. */
export async function up(db: Kysely<any>): Promise<void> {
	// Two people may edit one account: the second is told.
	await sql`alter table auth.person add version integer not null default 1`.execute(db);
	await sql`create index person_display_name on auth.person (lower(display_name), id)`.execute(db);
	await sql`alter table auth.session add seen_at timestamptz not null default now()`.execute(db);

	// The secret is made when the mail leaves, so that it stands in no job and no stored mail. A mail that is sent twice, after a
	// crash, makes two links, and both are of that one mail: a newer mail voids the links of older ones.
	for (const table of ['invitation', 'reset']) {
		await sql`alter table ${sql.table(`auth.${table}`)}
			add mail_id uuid not null, add voided_at timestamptz`.execute(db);
		await sql`create index ${sql.ref(`${table}_person`)} on ${sql.table(`auth.${table}`)} (person_id)`.execute(
			db
		);
	}

	// The auth login names a person's client, and answers a repeated request once, as the others do.
	await sql`create policy auth on client for select to trunnion_auth using (true)`.execute(db);
	await sql`grant select on client to trunnion_auth`.execute(db);
	await sql`create policy own_auth on idempotency to trunnion_auth
		using (person_id = (select acting_person())) with check (person_id = (select acting_person()))`.execute(db);
	await sql`grant select, insert on idempotency to trunnion_auth`.execute(db);

	// The trail is read newest first, whole or of one person.
	await sql`create index audit_at on audit (at, id)`.execute(db);
	await sql`create index audit_actor on audit (actor_id, at, id)`.execute(db);
}
