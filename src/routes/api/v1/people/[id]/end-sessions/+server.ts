import { operation } from '$lib/server/api';
import { endSessions, PersonView } from '$lib/server/people';

export const POST = operation({
	id: 'endPersonSessions',
	summary: 'Sign the person out everywhere; tokens go on',
	action: 'person.admin',
	answer: PersonView,
	run: ({ deps, who, params }) => endSessions(deps, who, params.id!)
});
