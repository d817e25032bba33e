import { operation } from '$lib/server/api';
import { inviteAgain, PersonView } from '$lib/server/people';

export const POST = operation({
	id: 'invitePersonAgain',
	summary: 'Send the invitation again; the links of earlier mails work no more',
	action: 'person.admin',
	answer: PersonView,
	run: ({ deps, who, params }) => inviteAgain(deps, who, params.id!)
});
