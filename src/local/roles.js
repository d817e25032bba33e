/**
 * The logins of the application, by what they may see:
 * `owner` makes the schema, `lab` works for the staff, `client` for one client's people, `auth` knows passwords and
 * sessions, `queue` runs the job queue. `trunnion_taken` signs in nowhere: it owns the one function that tells when a cell
 * is taken without telling by whom.
 */
export const LOGINS = /** @type {const} */ (['owner', 'lab', 'client', 'auth', 'queue']);

/** @typedef {(typeof LOGINS)[number]} Login */

/** @param {Login} login */
export const roleOf = (login) => `trunnion_${login}`;

/**
 * Makes the roles, or sets an existing one right again. Roles belong to the cluster, so no migration makes them.
 * @param {Record<Login, string>} passwords letters and digits only
 */
export function rolesSql(passwords) {
	const lines = LOGINS.map((login) => {
		if (!/^[A-Za-z0-9]+$/.test(passwords[login])) throw new Error(`the password of ${login} is not plain`);
		const may = `login nosuperuser nocreatedb nocreaterole noreplication nobypassrls ${login === 'owner' ? 'noinherit' : 'inherit'}`;
		return `${ensure(roleOf(login))}\nalter role ${roleOf(login)} ${may} password '${passwords[login]}';`;
	});
	lines.push(
		`${ensure('trunnion_taken')}\nalter role trunnion_taken nologin nosuperuser nocreatedb nocreaterole noreplication nobypassrls;`,
		// The owner acts as these two by SET ROLE only, to hand a function or a schema over to them.
		'grant trunnion_taken, trunnion_queue to trunnion_owner;'
	);
	return lines.join('\n');
}

/** @param {string} role */
const ensure = (role) =>
	`select 'create role ${role}' where not exists (select from pg_roles where rolname = '${role}') \\gexec`;

/**
 * Who may connect to a database and make schemas in it. PostgreSQL does not copy these from a template.
 * @param {string} database
 */
export function databaseGrants(database) {
	const name = `"${database}"`;
	return [
		`alter database ${name} owner to trunnion_owner`,
		`revoke all on database ${name} from public`,
		`grant connect on database ${name} to trunnion_lab, trunnion_client, trunnion_auth, trunnion_queue`,
		`grant create on database ${name} to trunnion_queue`
	];
}
