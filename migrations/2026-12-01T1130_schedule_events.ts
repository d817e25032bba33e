import { sql, type Kysely } from 'kysely';

/**
 * Word of changes over LISTEN/NOTIFY, given by triggers in the transaction that makes them, so that no use case can forget it
 * and nothing is said of what was rolled back. `schedule`: `taken` (when a cell is taken or closed has changed: anyone may know),
 * `booking <client>` (a booking of theirs). `access <person>`: a session, token, role or standing of theirs.
 */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create function tell_taken() returns trigger language plpgsql set search_path = pg_catalog as $$
		begin
			perform pg_notify('schedule', 'taken');
			return null;
		end $$`.execute(db);
	await sql`create trigger tell_taken after insert or delete on occupancy
		for each row execute function tell_taken()`.execute(db);
	// Only what everyone may see of it: a title or a build that changes tells nobody anything.
	await sql`create trigger tell_taken_moved after update on occupancy for each row
		when (old.cell_id is distinct from new.cell_id or old.during is distinct from new.during)
		execute function tell_taken()`.execute(db);

	await sql`create function tell_booking() returns trigger language plpgsql set search_path = pg_catalog as $$
		begin
			perform pg_notify('schedule', 'booking ' || new.client_id);
			return null;
		end $$`.execute(db);
	await sql`create trigger tell_booking after insert or update on booking
		for each row execute function tell_booking()`.execute(db);

	await sql`create function auth.tell_access() returns trigger language plpgsql set search_path = pg_catalog as $$
		begin
			perform pg_notify('access', to_jsonb(old) ->> tg_argv[0]);
			return null;
		end $$`.execute(db);
	await sql`create trigger tell_access after delete on auth.session
		for each row execute function auth.tell_access('user_id')`.execute(db);
	await sql`create trigger tell_access after update on auth.token for each row
		when (old.revoked_at is distinct from new.revoked_at)
		execute function auth.tell_access('person_id')`.execute(db);
	await sql`create trigger tell_access after update on auth.person for each row
		when (old.disabled_at is distinct from new.disabled_at or old.role is distinct from new.role
			or old.client_id is distinct from new.client_id)
		execute function auth.tell_access('id')`.execute(db);
}
