import type { z } from 'zod';
import { FUEL_PROPERTIES, type FuelFacts } from '$lib/domain/model';
import type { Principal } from '../access';
import { page, readCursor } from '../api';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { clientFor, resolve } from '../refs';
import type { FuelBatchView, FuelView, NewFuel, NewFuelBatch } from './schemas';

export { FuelBatchView, FuelView, NewFuel, NewFuelBatch } from './schemas';

export async function createFuel(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewFuel>
): Promise<z.input<typeof FuelView>> {
	return writing(deps.pools, who, async (trx) => {
		const components = input.components ?? null;
		const { id } = await trx
			.insertInto('fuel')
			.values({ code: input.code, name: input.name, components: components && (jsonb(components) as never) })
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'fuel.create',
			subject: 'fuel',
			subjectId: id,
			clientId: null,
			after: input
		});
		return { id, code: input.code, name: input.name, components };
	});
}

export async function listFuels(deps: Deps, who: Principal): Promise<z.input<typeof FuelView>[]> {
	const rows = await reading(deps.pools, who, (trx) =>
		trx.selectFrom('fuel').select(['id', 'code', 'name', 'components']).orderBy('code').execute()
	);
	return rows.map((row) => ({
		...row,
		components: row.components as z.input<typeof FuelView>['components']
	}));
}

function selectBatches(trx: Trx) {
	return trx
		.selectFrom('fuelBatch as b')
		.innerJoin('fuel as f', 'f.id', 'b.fuelId')
		.leftJoin('client as c', 'c.id', 'b.clientId')
		.select([
			'b.id',
			'c.code as client',
			'f.code as fuel',
			'b.code',
			'b.properties',
			'b.version',
			'b.createdAt'
		]);
}

type BatchRow = Awaited<ReturnType<ReturnType<typeof selectBatches>['executeTakeFirstOrThrow']>>;
const toBatch = (row: BatchRow): z.input<typeof FuelBatchView> => ({
	...row,
	properties: row.properties as z.input<typeof FuelBatchView>['properties']
});

export async function createFuelBatch(deps: Deps, who: Principal, input: z.output<typeof NewFuelBatch>) {
	const properties: FuelFacts = {};
	for (const name of FUEL_PROPERTIES) {
		const given = input[name];
		if (given) properties[name] = given;
	}
	return writing(deps.pools, who, async (trx) => {
		const clientId = await clientFor(trx, who, input.client);
		const fuel = await resolve(trx, 'fuel', input.fuel, { field: 'fuel' });
		const { id } = await trx
			.insertInto('fuelBatch')
			.values({ clientId, fuelId: fuel.id, code: input.code, properties: jsonb(properties) as never })
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'batch.create',
			subject: 'fuel_batch',
			subjectId: id,
			clientId,
			after: input
		});
		return toBatch(await selectBatches(trx).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}

export async function listFuelBatches(
	deps: Deps,
	who: Principal,
	query: { limit: number; cursor?: string | undefined }
) {
	const rows = await reading(deps.pools, who, (trx) => {
		const all = selectBatches(trx)
			.orderBy('b.id')
			.limit(query.limit + 1);
		return (query.cursor ? all.where('b.id', '>', readCursor(query.cursor)[0]!) : all).execute();
	});
	return page(rows.map(toBatch), query.limit, (row) => [row.id]);
}

export async function getFuelBatch(deps: Deps, who: Principal, ref: string) {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'fuel_batch', ref);
		return toBatch(await selectBatches(trx).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}
