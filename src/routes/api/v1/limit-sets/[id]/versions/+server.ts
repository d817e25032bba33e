import { z } from 'zod';
import { operation } from '$lib/server/api';
import {
	addLimitSetVersion,
	LimitSetVersionView,
	LimitSetView,
	listLimitSetVersions,
	NewLimitSetVersion
} from '$lib/server/limits';

export const GET = operation({
	id: 'listLimitSetVersions',
	summary: 'Every version of a limit set, newest first, with when runs are judged by it',
	action: 'lab.read',
	answer: z.object({ items: z.array(LimitSetVersionView) }),
	run: async ({ deps, who, params }) => ({ items: await listLimitSetVersions(deps, who, params.id!) })
});

export const POST = operation({
	id: 'addLimitSetVersion',
	summary: 'Put new rules in force; earlier runs stay judged by theirs',
	action: 'limits.write',
	body: NewLimitSetVersion,
	answer: LimitSetView,
	status: 201,
	run: ({ deps, who, params, body, ifMatch }) => addLimitSetVersion(deps, who, params.id!, body, ifMatch)
});
