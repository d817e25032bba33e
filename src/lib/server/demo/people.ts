import type { Principal } from '../access';
import { addPerson } from '../auth';
import type { Deps } from '../deps';
import { DEMO_PASSWORD, DEMO_PEOPLE, type DemoPerson } from './lab/people';

/** Who acts, by key: staff by role, customers by their client's code. */
export type Cast = (key: string) => Principal;

async function addMissing(deps: Deps, people: readonly DemoPerson[]): Promise<void> {
	const known = await deps.pools.auth
		.selectFrom('auth.person')
		.select('email')
		.where(
			'email',
			'in',
			people.map(({ email }) => email)
		)
		.execute();
	for (const { email, name, role, client } of people)
		if (!known.some((row) => row.email === email))
			await addPerson(deps, { email, name, role, clientCode: client, password: DEMO_PASSWORD });
}

/** The people as the application would know them when they are signed in. */
export async function castOf(deps: Deps): Promise<Cast> {
	const rows = await deps.pools.auth
		.selectFrom('auth.person')
		.select(['id', 'email', 'displayName', 'role', 'clientId', 'units'])
		.execute();
	return (key) => {
		const email = DEMO_PEOPLE.find((person) => person.key === key)?.email;
		const row = rows.find((one) => one.email === email);
		if (!row) throw new Error(`the demo lab has nobody called ${key}`);
		return {
			personId: row.id,
			name: row.displayName,
			email: row.email,
			role: row.role as Principal['role'],
			clientId: row.clientId,
			units: row.units as Principal['units'],
			via: { kind: 'session', id: 'demo-seed' }
		};
	};
}

export const addStaff = (deps: Deps) =>
	addMissing(
		deps,
		DEMO_PEOPLE.filter(({ client }) => !client)
	);
export const addCustomers = (deps: Deps) =>
	addMissing(
		deps,
		DEMO_PEOPLE.filter(({ client }) => client)
	);
