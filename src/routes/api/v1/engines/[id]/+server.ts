import { operation } from '$lib/server/api';
import { EngineView, getEngine } from '$lib/server/engines';

export const GET = operation({
	id: 'getEngine',
	summary: 'One engine',
	action: 'engine.read',
	answer: EngineView,
	run: ({ deps, who, params }) => getEngine(deps, who, params.id!)
});
