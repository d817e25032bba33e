import { z } from 'zod';
import { operation } from '$lib/server/api';
import { createLimitSet, LimitSetView, listLimitSets, NewLimitSet } from '$lib/server/limits';

export const GET = operation({
	id: 'listLimitSets',
	summary: 'Limit sets of the lab and your own, each with its newest version',
	action: 'lab.read',
	answer: z.object({ items: z.array(LimitSetView) }),
	run: async ({ deps, who }) => ({ items: await listLimitSets(deps, who) })
});

export const POST = operation({
	id: 'createLimitSet',
	summary: 'Add a limit set; without `client` it is the lab’s',
	action: 'limits.write',
	body: NewLimitSet,
	answer: LimitSetView,
	status: 201,
	run: ({ deps, who, body }) => createLimitSet(deps, who, body)
});
