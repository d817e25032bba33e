import { operation } from '$lib/server/api';
import { addLimitSetVersion, LimitSetView, NewLimitSetVersion } from '$lib/server/limits';

export const POST = operation({
	id: 'addLimitSetVersion',
	summary: 'Put new rules in force; earlier runs stay judged by theirs',
	action: 'limits.write',
	body: NewLimitSetVersion,
	answer: LimitSetView,
	status: 201,
	run: ({ deps, who, params, body, ifMatch }) => addLimitSetVersion(deps, who, params.id!, body, ifMatch)
});
