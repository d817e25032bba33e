import { z } from 'zod';
import { operation } from '$lib/server/api';
import { addReading, listReadings, NewReading, ReadingView } from '$lib/server/logbook';

export const GET = operation({
	id: 'listReadings',
	summary: 'Readings of the air in the cell during the run, corrected ones included',
	action: 'run.read',
	answer: z.object({ items: z.array(ReadingView) }),
	run: async ({ deps, who, params }) => ({ items: await listReadings(deps, who, params.id!) })
});

export const POST = operation({
	id: 'addReading',
	summary: 'Add a reading of the air, or correct one by superseding it',
	action: 'run.log',
	body: NewReading,
	answer: ReadingView,
	status: 201,
	run: ({ deps, who, params, body }) => addReading(deps, who, params.id!, body)
});
