import { z } from 'zod';
import { operation } from '$lib/server/api';
import { createFuel, FuelView, listFuels, NewFuel } from '$lib/server/fuels';

export const GET = operation({
	id: 'listFuels',
	summary: 'The lab’s fuels',
	action: 'lab.read',
	answer: z.object({ items: z.array(FuelView) }),
	run: async ({ deps, who }) => ({ items: await listFuels(deps, who) })
});

export const POST = operation({
	id: 'createFuel',
	summary: 'Add a fuel',
	action: 'fuel.write',
	body: NewFuel,
	answer: FuelView,
	status: 201,
	run: ({ deps, who, body }) => createFuel(deps, who, body)
});
