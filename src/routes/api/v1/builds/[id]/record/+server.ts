import { operation } from '$lib/server/api';
import { BuildRecord, getBuildRecord } from '$lib/server/builds';

export const GET = operation({
	id: 'getBuildRecord',
	summary: 'Hours, best figures and lineage of a build',
	action: 'engine.read',
	answer: BuildRecord,
	run: ({ deps, who, params }) => getBuildRecord(deps, who, params.id!)
});
