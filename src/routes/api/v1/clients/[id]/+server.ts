import { operation } from '$lib/server/api';
import { ClientView, getClient } from '$lib/server/clients';

export const GET = operation({
	id: 'getClient',
	summary: 'One client',
	action: 'client.read',
	answer: ClientView,
	run: ({ deps, who, params }) => getClient(deps, who, params.id!)
});
