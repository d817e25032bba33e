import { z } from 'zod';
import { fields, operation } from '$lib/server/api';
import { endOwnSessions, listSessions } from '$lib/server/auth';

const Session = z.object({
	id: z.string(),
	createdAt: fields.instantOut,
	seenAt: fields.instantOut,
	userAgent: z.string().nullable(),
	isThis: z.boolean()
});

export const GET = operation({
	id: 'listSessions',
	summary: 'Where you are signed in, latest seen first',
	action: 'account.own',
	answer: z.object({ items: z.array(Session) }),
	run: async ({ deps, who }) => ({ items: await listSessions(deps, who) })
});

export const DELETE = operation({
	id: 'endSessions',
	summary: 'End one of your sessions, or all others than the one that asks',
	action: 'account.own',
	query: z.object({ id: z.string().max(100, 'is too long for a session').optional() }),
	answer: z.object({ ended: z.number().int() }),
	run: async ({ deps, who, query }) => ({ ended: await endOwnSessions(deps, who, query.id) })
});
