import { z } from 'zod';
import { operation } from '$lib/server/api';
import {
	AddedChainView,
	addTorqueChain,
	listTorqueChain,
	NewTorqueChain,
	TorqueChainView
} from '$lib/server/cells';

export const GET = operation({
	id: 'listTorqueChain',
	summary: 'Every version of how a cell weighs torque, newest first, with when it is in force',
	action: 'lab.read',
	answer: z.object({ items: z.array(TorqueChainView) }),
	run: async ({ deps, who, params }) => ({ items: await listTorqueChain(deps, who, params.id!) })
});

export const POST = operation({
	id: 'addTorqueChain',
	summary:
		'Add a version of how a cell weighs torque; a run is computed with the one in force at its start, and `recompute` asks for what the new one changes of the past',
	action: 'cell.write',
	body: NewTorqueChain,
	answer: AddedChainView,
	status: 201,
	run: ({ deps, who, params, body, ifMatch }) => addTorqueChain(deps, who, params.id!, body, ifMatch)
});
