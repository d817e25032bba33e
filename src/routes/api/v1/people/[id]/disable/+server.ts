import { operation } from '$lib/server/api';
import { disablePerson, PersonDisable, PersonView } from '$lib/server/people';

export const POST = operation({
	id: 'disablePerson',
	summary: 'Close the account: sessions end, tokens are refused, links are void',
	action: 'person.admin',
	body: PersonDisable,
	answer: PersonView,
	run: ({ deps, who, params, body }) => disablePerson(deps, who, params.id!, body)
});
