import { operation } from '$lib/server/api';
import { changeFuel, FuelChange, FuelView, getFuel } from '$lib/server/fuels';

export const GET = operation({
	id: 'getFuel',
	summary: 'One fuel',
	action: 'lab.read',
	answer: FuelView,
	run: ({ deps, who, params }) => getFuel(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeFuel',
	summary: 'Change a fuel’s name, components or specification',
	action: 'fuel.write',
	body: FuelChange,
	answer: FuelView,
	run: ({ deps, who, params, body, ifMatch }) => changeFuel(deps, who, params.id!, body, ifMatch)
});
