import type { z } from 'zod';
import { changedFields, changesInWords, type FieldWords } from '$lib/domain/history/changes';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { readHistory, type History } from '../history';
import { stale } from '../problem';
import { resolve } from '../refs';
import type { Fuel, FuelChange, NewFuel } from './schemas';

function selectFuels(trx: Trx) {
	return trx.selectFrom('fuel').select(['id', 'code', 'name', 'components', 'specification', 'version']);
}
type Row = Awaited<ReturnType<ReturnType<typeof selectFuels>['executeTakeFirstOrThrow']>>;
const toFuel = (row: Row): Fuel => ({
	...row,
	components: row.components as Fuel['components'],
	specification: row.specification as unknown as Fuel['specification']
});
const readFuel = async (trx: Trx, id: string): Promise<Fuel> =>
	toFuel(await selectFuels(trx).where('id', '=', id).executeTakeFirstOrThrow());

export async function createFuel(deps: Deps, who: Principal, input: z.output<typeof NewFuel>): Promise<Fuel> {
	return writing(deps.pools, who, async (trx) => {
		const components = input.components ?? null;
		const { id } = await trx
			.insertInto('fuel')
			.values({
				code: input.code,
				name: input.name,
				components: components && (jsonb(components) as never),
				specification: jsonb(input.specification ?? {}) as never
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'fuel.create',
			subject: 'fuel',
			subjectId: id,
			clientId: null,
			after: input
		});
		return readFuel(trx, id);
	});
}

export async function changeFuel(
	deps: Deps,
	who: Principal,
	ref: string,
	change: z.output<typeof FuelChange>,
	ifMatch: number | null
): Promise<Fuel> {
	return writing(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'fuel', ref);
		const before = toFuel(await selectFuels(trx).where('id', '=', id).forUpdate().executeTakeFirstOrThrow());
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const changed = changedFields(before, change as Partial<Fuel>);
		if (changed.length === 0) return before;
		const { name, components, specification } = change;
		await trx
			.updateTable('fuel')
			.set({
				version: before.version + 1,
				...(name === undefined ? {} : { name }),
				...(components === undefined ? {} : { components: components && (jsonb(components) as never) }),
				...(specification === undefined ? {} : { specification: jsonb(specification) as never })
			})
			.where('id', '=', id)
			.execute();
		const of = (fuel: Partial<Fuel>) => Object.fromEntries(changed.map((field) => [field, fuel[field]]));
		await recordAudit(trx, who, {
			action: 'fuel.change',
			subject: 'fuel',
			subjectId: id,
			clientId: null,
			before: of(before),
			after: of(change as Partial<Fuel>)
		});
		return readFuel(trx, id);
	});
}

export async function listFuels(deps: Deps, who: Principal): Promise<Fuel[]> {
	const rows = await reading(deps.pools, who, (trx) => selectFuels(trx).orderBy('code').execute());
	return rows.map(toFuel);
}

export async function getFuel(deps: Deps, who: Principal, ref: string): Promise<Fuel> {
	return reading(deps.pools, who, async (trx) => readFuel(trx, (await resolve(trx, 'fuel', ref)).id));
}

const count = (value: unknown) =>
	typeof value === 'object' && value !== null ? String(Object.keys(value).length) : 'none';
const WORDS: Readonly<Record<string, FieldWords>> = {
	name: { label: 'Name', text: (value) => `“${String(value)}”` },
	components: { label: 'Components', text: count },
	specification: { label: 'Lines of the specification', text: count }
};

export async function fuelHistory(deps: Deps, who: Principal, ref: string): Promise<History> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'fuel', ref);
		return readHistory(trx, 'fuel', id, (before, after) => changesInWords(before, after, WORDS));
	});
}
