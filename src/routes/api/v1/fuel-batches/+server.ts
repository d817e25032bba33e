import { operation, pageOf, PageQuery } from '$lib/server/api';
import {
	createFuelBatch,
	FuelBatchQuery,
	FuelBatchView,
	listFuelBatches,
	NewFuelBatch
} from '$lib/server/fuels';

export const GET = operation({
	id: 'listFuelBatches',
	summary: 'Fuel batches of the lab and your own',
	action: 'lab.read',
	query: PageQuery.extend(FuelBatchQuery.shape),
	answer: pageOf(FuelBatchView),
	run: ({ deps, who, query }) => listFuelBatches(deps, who, query)
});

export const POST = operation({
	id: 'createFuelBatch',
	summary: 'Add a batch; without `client` it is the lab’s',
	action: 'fuel.write',
	body: NewFuelBatch,
	answer: FuelBatchView,
	status: 201,
	run: ({ deps, who, body }) => createFuelBatch(deps, who, body)
});
