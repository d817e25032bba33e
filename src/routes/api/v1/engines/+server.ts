import { operation, pageOf } from '$lib/server/api';
import { createEngine, EngineQuery, EngineView, NewEngine, pageEngines } from '$lib/server/engines';

/** Asked without a limit, all come at once. */
const ALL = 100_000;

export const GET = operation({
	id: 'listEngines',
	summary: 'Engines you may see; all of them unless a limit is given',
	action: 'engine.read',
	query: EngineQuery,
	answer: pageOf(EngineView),
	run: ({ deps, who, query }) => pageEngines(deps, who, { ...query, limit: query.limit ?? ALL })
});

export const POST = operation({
	id: 'createEngine',
	summary: 'Add an engine',
	action: 'engine.write',
	body: NewEngine,
	answer: EngineView,
	status: 201,
	run: ({ deps, who, body }) => createEngine(deps, who, body)
});
