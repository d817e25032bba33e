import type { Role } from '../access';
import { recordAudit, SYSTEM, writingAccounts, type Actor, type Trx } from '../db';
import type { Deps } from '../deps';
import { badRequest, wrongField } from '../problem';
import { hashPassword, requireGoodPassword } from './passwords';

interface NewAccount {
	email: string;
	name: string;
	role: Role;
	/** Code of the client the person belongs to; for the role client, and for no other. */
	client?: string | undefined;
}

const ADDRESS =
	/^[a-z0-9.!#$%&'*+/=?^_`{|}~-]+@[a-z0-9](?:[a-z0-9-]*[a-z0-9])?(?:\.[a-z0-9](?:[a-z0-9-]*[a-z0-9])?)+$/;

/** The client that goes with this role. @throws Problem 400 at the field where they do not go together */
export async function clientOfRole(trx: Trx, role: Role, ref: string | undefined): Promise<string | null> {
	if ((role === 'client') !== (ref !== undefined))
		throw badRequest('A person of the role client names a client; staff name none.', {
			client: ref === undefined ? 'choose the client that they belong to.' : 'only the role client has one.'
		});
	if (ref === undefined) return null;
	const clients = await trx.selectFrom('client').select(['id', 'code']).execute();
	const found = clients.find(({ id, code }) => id === ref.toLowerCase() || code === ref);
	if (!found) throw wrongField('client', `there is no client ${ref.slice(0, 60)}.`);
	return found.id;
}

/** Writes a person who cannot sign in yet: a password comes by invitation, or from the command line. */
export async function insertPerson(
	trx: Trx,
	actor: Actor,
	action: string,
	person: NewAccount
): Promise<{ id: string; clientId: string | null }> {
	const email = person.email.trim().toLowerCase();
	if (!ADDRESS.test(email) || email.length > 254)
		throw wrongField('email', 'this is not a mail address we can send to.');
	const name = person.name.trim();
	if (!name) throw wrongField('name', 'give the person’s name.');
	const clientId = await clientOfRole(trx, person.role, person.client);
	const { id } = await trx
		.insertInto('auth.person')
		.values({ email, displayName: name, role: person.role, clientId })
		.returning('id')
		.executeTakeFirstOrThrow();
	await recordAudit(trx, actor, {
		action,
		subject: 'person',
		subjectId: id,
		clientId,
		after: { email, name, role: person.role, client: person.client ?? null }
	});
	return { id, clientId };
}

/** Adds a person who can sign in at once. @throws Problem 400 at the field, 409 when the address has an account */
export async function addPerson(
	deps: Deps,
	{
		password,
		clientCode,
		...person
	}: Omit<NewAccount, 'client'> & {
		clientCode?: string | undefined;
		password: string;
	}
): Promise<string> {
	requireGoodPassword(password, 'password', person);
	const hash = await hashPassword(password);
	return writingAccounts(deps.pools, SYSTEM, async (trx) => {
		const { id } = await insertPerson(trx, SYSTEM, 'person.add', { ...person, client: clientCode });
		await trx.insertInto('auth.password').values({ personId: id, hash }).execute();
		return id;
	});
}

/** Where to write to someone; null when they may no longer be written to. `isIn`: they have chosen a password. */
export async function addressOf(
	deps: Deps,
	personId: string
): Promise<{ email: string; name: string; isIn: boolean } | null> {
	const row = await deps.pools.auth
		.selectFrom('auth.person as p')
		.leftJoin('auth.password as w', 'w.personId', 'p.id')
		.select(['p.email', 'p.displayName', 'w.personId as isIn'])
		.where('p.id', '=', personId)
		.where('p.disabledAt', 'is', null)
		.executeTakeFirst();
	return row ? { email: row.email, name: row.displayName, isIn: row.isIn !== null } : null;
}
