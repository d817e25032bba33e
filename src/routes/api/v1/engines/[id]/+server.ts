import { operation } from '$lib/server/api';
import { ChangedEngine, changeEngine, EngineChange, EngineView, getEngine } from '$lib/server/engines';

export const GET = operation({
	id: 'getEngine',
	summary: 'One engine',
	action: 'engine.read',
	answer: EngineView,
	run: ({ deps, who, params }) => getEngine(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeEngine',
	summary: 'Change an engine; figures made before stay until they are computed again',
	action: 'engine.write',
	body: EngineChange,
	answer: ChangedEngine,
	run: ({ deps, who, params, body, ifMatch }) => changeEngine(deps, who, params.id!, body, ifMatch)
});
