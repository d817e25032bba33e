import type { Trx } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import type { Outgoing } from './outgoing';
import type { Letter } from './text';

/**
 * The one letter of what happens to a person's account. Letters that carry a link are kept without it: it is added when the
 * mail leaves, as the last paragraph.
 */
export async function accountLetters(
	trx: Trx,
	deps: Deps,
	{ event, personId, byId }: JobData<'mail.account'>
): Promise<Outgoing[]> {
	const people = await trx
		.selectFrom('person as p')
		.leftJoin('client as c', 'c.id', 'p.clientId')
		.select(['p.id', 'p.displayName as name', 'p.role', 'p.active', 'c.name as client'])
		.where('p.id', 'in', [personId, ...(byId ? [byId] : [])])
		.execute();
	const person = people.find(({ id }) => id === personId);
	if (!person?.active) return [];
	const by = people.find(({ id }) => id === byId)?.name ?? null;
	const letters = { 'person.invited': invited, 'person.reset': reset, 'person.password_changed': changed };
	return [{ recipientId: personId, letter: letters[event](deps, person, by) }];
}

interface Person {
	name: string;
	role: string;
	client: string | null;
}

function invited({ config }: Deps, person: Person, by: string | null): Letter {
	return {
		subject: `Your account at ${config.labName}`,
		opening: `${by ? `${by} invites you` : 'You are invited'} to the bookings and run records of ${config.labName}.`,
		facts: [
			['Name', person.name],
			['Role', person.role],
			['For', person.client ?? config.labName]
		],
		paragraphs: [
			'Open the address below and choose a password. It works once, and for 7 days from now; a later invitation replaces it.',
			'If you expected no invitation, leave this mail alone: without you nothing happens.'
		],
		link: ''
	};
}

function reset({ config }: Deps, person: Person): Letter {
	return {
		subject: `A new password at ${config.labName}`,
		opening: `Someone, probably you, asked for a new password for ${person.name}.`,
		facts: [],
		paragraphs: [
			'Open the address below and choose one. It works once, and for 60 minutes from now; a later mail of this kind replaces it. You are signed out everywhere when the new password is set.',
			'If you did not ask, leave this mail alone: your password stays as it is.'
		],
		link: ''
	};
}

function changed({ config }: Deps, person: Person): Letter {
	return {
		subject: `Your password at ${config.labName} was changed`,
		opening: `The password of ${person.name} is another one now, and sessions that were open elsewhere have ended.`,
		facts: [],
		paragraphs: [
			'If that was you, nothing is left to do. If it was not, ask for a new password at the address below at once, look through the tokens of your account, and tell the laboratory’s administrator.'
		],
		link: `${config.origin}/forgotten`
	};
}
