import { operation, pageOf, PageQuery } from '$lib/server/api';
import { BuildQuery, BuildView, createBuild, listBuilds, NewBuild } from '$lib/server/builds';

export const GET = operation({
	id: 'listBuilds',
	summary: 'Builds you may see, newest first',
	action: 'engine.read',
	query: PageQuery.extend(BuildQuery.shape),
	answer: pageOf(BuildView),
	run: ({ deps, who, query }) => listBuilds(deps, who, query)
});

export const POST = operation({
	id: 'createBuild',
	summary: 'Add a build of an engine',
	action: 'build.write',
	body: NewBuild,
	answer: BuildView,
	status: 201,
	run: ({ deps, who, body }) => createBuild(deps, who, body)
});
