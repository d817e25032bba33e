import type { Role } from '../access';
import type { Deps } from '../deps';
import { badRequest, wrongField } from '../problem';
import { hashPassword, requireGoodPassword } from './passwords';

export interface NewPerson {
	email: string;
	name: string;
	role: Role;
	clientCode?: string | undefined;
	password: string;
}

const ADDRESS =
	/^[a-z0-9.!#$%&'*+/=?^_`{|}~-]+@[a-z0-9](?:[a-z0-9-]*[a-z0-9])?(?:\.[a-z0-9](?:[a-z0-9-]*[a-z0-9])?)+$/;

/** Adds a person who can sign in. @throws Problem 400 at the field, 409 when the address has an account */
export async function addPerson(deps: Deps, person: NewPerson): Promise<string> {
	const email = person.email.trim().toLowerCase();
	if (!ADDRESS.test(email) || email.length > 254)
		throw wrongField('email', 'this is not a mail address we can send to.');
	if (!person.name.trim()) throw wrongField('name', 'give the person’s name.');
	requireGoodPassword(person.password, 'password');
	if ((person.role === 'client') !== (person.clientCode !== undefined))
		throw badRequest('A person of the role client names a client; staff name none.', {
			client: 'needed for the role client only'
		});
	const hash = await hashPassword(person.password);
	return deps.pools.auth.transaction().execute(async (trx) => {
		let clientId: string | null = null;
		if (person.clientCode) {
			const client = await deps.pools.lab
				.selectFrom('client')
				.select('id')
				.where('code', '=', person.clientCode)
				.executeTakeFirst();
			if (!client) throw wrongField('client', `there is no client ${person.clientCode}.`);
			clientId = client.id;
		}
		const { id } = await trx
			.insertInto('auth.person')
			.values({ email, displayName: person.name.trim(), role: person.role, clientId })
			.returning('id')
			.executeTakeFirstOrThrow();
		await trx.insertInto('auth.password').values({ personId: id, hash }).execute();
		await trx
			.insertInto('audit')
			.values({ actorId: null, clientId, action: 'person.add', subject: 'person', subjectId: id })
			.execute();
		return id;
	});
}

/** Where to write to someone; null when they may no longer be written to. */
export async function addressOf(
	deps: Deps,
	personId: string
): Promise<{ email: string; name: string } | null> {
	const row = await deps.pools.auth
		.selectFrom('auth.person')
		.select(['email', 'displayName'])
		.where('id', '=', personId)
		.where('disabledAt', 'is', null)
		.executeTakeFirst();
	return row ? { email: row.email, name: row.displayName } : null;
}
