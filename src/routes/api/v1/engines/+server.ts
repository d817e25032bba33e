import { z } from 'zod';
import { operation } from '$lib/server/api';
import { createEngine, EngineView, listEngines, NewEngine } from '$lib/server/engines';

export const GET = operation({
	id: 'listEngines',
	summary: 'Engines you may see',
	action: 'engine.read',
	answer: z.object({ items: z.array(EngineView) }),
	run: async ({ deps, who }) => ({ items: await listEngines(deps, who) })
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
