import { operation } from '$lib/server/api';
import {
	ChangedFuelBatch,
	changeFuelBatch,
	FuelBatchChange,
	FuelBatchView,
	getFuelBatch
} from '$lib/server/fuels';

export const GET = operation({
	id: 'getFuelBatch',
	summary: 'One fuel batch',
	action: 'lab.read',
	answer: FuelBatchView,
	run: ({ deps, who, params }) => getFuelBatch(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeFuelBatch',
	summary: 'Append measured values as a new version; figures made before stay until they are computed again',
	action: 'fuel.write',
	body: FuelBatchChange,
	answer: ChangedFuelBatch,
	run: ({ deps, who, params, body, ifMatch }) => changeFuelBatch(deps, who, params.id!, body, ifMatch)
});
