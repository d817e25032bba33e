import { operation } from '$lib/server/api';
import { enablePerson, PersonView } from '$lib/server/people';

export const POST = operation({
	id: 'enablePerson',
	summary: 'Open the account again, with the password and the tokens that it had',
	action: 'person.admin',
	answer: PersonView,
	run: ({ deps, who, params }) => enablePerson(deps, who, params.id!)
});
