import { operation } from '$lib/server/api';
import { changePerson, getPerson, PersonChange, PersonView } from '$lib/server/people';

export const GET = operation({
	id: 'getPerson',
	summary: 'One person',
	action: 'person.admin',
	answer: PersonView,
	run: ({ deps, who, params }) => getPerson(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changePerson',
	summary: 'Another name, role or client; it holds from the person’s next request on',
	action: 'person.admin',
	body: PersonChange,
	answer: PersonView,
	run: ({ deps, who, params, body, ifMatch }) => changePerson(deps, who, params.id!, body, ifMatch)
});
