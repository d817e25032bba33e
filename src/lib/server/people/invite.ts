import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import { requireMay, type Principal } from '../access';
import { insertPerson } from '../auth';
import { recordAudit, SYSTEM, writingAccounts, type Actor, type Trx } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { conflict } from '../problem';
import { lockPerson } from './locked';
import { personView } from './read';
import type { NewPerson, Person } from './schemas';

async function promiseInvitation(
	trx: Trx,
	actor: Actor,
	{ id: personId, clientId }: { id: string; clientId: string | null }
): Promise<void> {
	const occasionId = randomUUID();
	await enqueue(
		trx,
		'mail.account',
		{ event: 'person.invited', personId, clientId, occasionId, byId: actor.personId },
		occasionId
	);
}

async function invite(deps: Deps, actor: Actor, input: z.output<typeof NewPerson>): Promise<Person> {
	return writingAccounts(deps.pools, actor, async (trx) => {
		const person = await insertPerson(trx, actor, 'person.invite', input);
		await promiseInvitation(trx, actor, person);
		return personView(trx, person.id, deps.now());
	});
}

/** Adds a person and mails them a link to choose a password. @throws Problem 400 at the field, 409 when the address has an account */
export async function invitePerson(deps: Deps, who: Principal, input: z.output<typeof NewPerson>) {
	requireMay(who, 'person.admin');
	return invite(deps, who, input);
}

/** The same for the operator's command line: no person is signed in there. */
export const inviteFromCommandLine = (deps: Deps, input: z.output<typeof NewPerson>) =>
	invite(deps, SYSTEM, input);

/** Another mail with a new link; the links of earlier ones work no more once it is sent. */
export async function inviteAgain(deps: Deps, who: Principal, id: string): Promise<Person> {
	requireMay(who, 'person.admin');
	return writingAccounts(deps.pools, who, async (trx) => {
		const person = await lockPerson(trx, id, null);
		if (person.disabledAt) throw conflict(`${person.name}’s account is disabled. Enable it first.`);
		if (person.isIn)
			throw conflict(`${person.name} has accepted an invitation already, and can ask for a new password.`);
		await promiseInvitation(trx, who, person);
		await recordAudit(trx, who, {
			action: 'person.invite_again',
			subject: 'person',
			subjectId: person.id,
			clientId: person.clientId
		});
		return personView(trx, person.id, deps.now());
	});
}
