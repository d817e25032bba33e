import { z } from 'zod';
import { operation } from '$lib/server/api';
import { ClientView, createClient, listClients, NewClient } from '$lib/server/clients';

export const GET = operation({
	id: 'listClients',
	summary: 'Clients you may see',
	action: 'client.read',
	answer: z.object({ items: z.array(ClientView) }),
	run: async ({ deps, who }) => ({ items: await listClients(deps, who) })
});

export const POST = operation({
	id: 'createClient',
	summary: 'Add a client',
	action: 'client.create',
	body: NewClient,
	answer: ClientView,
	status: 201,
	run: ({ deps, who, body }) => createClient(deps, who, body)
});
