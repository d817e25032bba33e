import { z } from 'zod';
import { operation } from '$lib/server/api';
import { recomputeCell } from '$lib/server/cells';

export const POST = operation({
	id: 'recomputeCell',
	summary: 'Compute again what comes from another torque chain than the one in force at its run’s start',
	action: 'cell.write',
	answer: z.object({ traces: z.number() }),
	status: 202,
	run: ({ deps, who, params }) => recomputeCell(deps, who, params.id!)
});
