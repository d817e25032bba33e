import { operation } from '$lib/server/api';
import { BuildChange, BuildView, changeBuild, getBuild } from '$lib/server/builds';

export const GET = operation({
	id: 'getBuild',
	summary: 'One build',
	action: 'engine.read',
	answer: BuildView,
	run: ({ deps, who, params }) => getBuild(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeBuild',
	summary: 'Change a build’s title, parts or state',
	action: 'build.write',
	body: BuildChange,
	answer: BuildView,
	run: ({ deps, who, params, body, ifMatch }) => changeBuild(deps, who, params.id!, body, ifMatch)
});
