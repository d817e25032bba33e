import { operation } from '$lib/server/api';
import { BuildView, followBuild } from '$lib/server/builds';

export const POST = operation({
	id: 'followBuild',
	summary: 'Be mailed when a run of this build is flagged',
	action: 'build.follow',
	answer: BuildView,
	run: ({ deps, who, params }) => followBuild(deps, who, params.id!, true)
});

export const DELETE = operation({
	id: 'unfollowBuild',
	summary: 'No longer be mailed about this build',
	action: 'build.follow',
	answer: BuildView,
	run: ({ deps, who, params }) => followBuild(deps, who, params.id!, false)
});
