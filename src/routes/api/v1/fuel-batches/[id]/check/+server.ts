import { operation } from '$lib/server/api';
import { checkFuelBatch, FuelBatchCheck } from '$lib/server/fuels';

export const GET = operation({
	id: 'checkFuelBatch',
	summary:
		'A batch against its fuel’s specification, against itself, and against rules that speak of the fuel',
	action: 'lab.read',
	answer: FuelBatchCheck,
	run: ({ deps, who, params }) => checkFuelBatch(deps, who, params.id!)
});
