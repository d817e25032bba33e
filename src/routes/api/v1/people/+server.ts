import { operation, pageOf } from '$lib/server/api';
import { invitePerson, listPeople, NewPerson, PersonQuery, PersonView } from '$lib/server/people';

export const GET = operation({
	id: 'listPeople',
	summary: 'Everyone who has an account',
	action: 'person.admin',
	query: PersonQuery,
	answer: pageOf(PersonView),
	run: ({ deps, who, query }) => listPeople(deps, who, query)
});

export const POST = operation({
	id: 'addPerson',
	summary: 'Add a person; a mail invites them to choose a password',
	action: 'person.admin',
	body: NewPerson,
	answer: PersonView,
	status: 201,
	run: ({ deps, who, body }) => invitePerson(deps, who, body)
});
