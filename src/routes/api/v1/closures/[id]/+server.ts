import { z } from 'zod';
import { operation } from '$lib/server/api';
import { removeClosure } from '$lib/server/bookings';

export const DELETE = operation({
	id: 'removeClosure',
	summary: 'Open the cell again',
	action: 'closure.write',
	answer: z.void(),
	status: 204,
	run: ({ deps, who, params }) => removeClosure(deps, who, params.id!)
});
