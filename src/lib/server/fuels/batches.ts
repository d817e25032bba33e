import { sql } from 'kysely';
import type { z } from 'zod';
import { batchChangesInWords } from '$lib/domain/fuels/fuel-words';
import { againstSpecification, type Specification } from '$lib/domain/fuels/specification';
import { fuelDisagreements } from '$lib/domain/formulas/fuel';
import { changedFields } from '$lib/domain/history/changes';
import { judgeFuel } from '$lib/domain/limits/judge';
import { FUEL_PROPERTIES, type FuelFacts } from '$lib/domain/model';
import type { Principal } from '../access';
import { containing, page, sortedBy, type SortKey } from '../api';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { readHistory, type History } from '../history';
import { listLimitSets } from '../limits';
import { stale } from '../problem';
import { recomputeBehind, runsBehind, type Behind } from '../recompute';
import { clientFor, resolve } from '../refs';
import type {
	FuelBatch,
	FuelBatchChange,
	FuelBatchCheck,
	FuelBatchQuery,
	FuelBatchVersions,
	NewFuelBatch
} from './schemas';

const RUNS = sql<number>`(select count(*) from run r where r.fuel_batch_id = b.id)`;

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
			RUNS.as('runs')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectBatches>['executeTakeFirstOrThrow']>>;
const toBatch = (row: Row): FuelBatch => ({
	...row,
	properties: row.properties as FuelBatch['properties'],
	runs: Number(row.runs)
});
const readBatch = async (trx: Trx, id: string): Promise<FuelBatch> =>
	toBatch(await selectBatches(trx).where('b.id', '=', id).executeTakeFirstOrThrow());

export async function createFuelBatch(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewFuelBatch>
): Promise<FuelBatch> {
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
		return readBatch(trx, id);
	});
}

/**
 * Appends what was measured of a batch as its next version. What earlier figures were made with stays; they change only
 * when that is asked for, so the answer says how many runs have such figures.
 */
export async function changeFuelBatch(
	deps: Deps,
	who: Principal,
	ref: string,
	{ reason, ...change }: z.output<typeof FuelBatchChange>,
	ifMatch: number | null
): Promise<FuelBatch & { behind: Behind }> {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'fuel_batch', ref);
		await trx.selectFrom('fuelBatch').select('id').where('id', '=', id).forUpdate().execute();
		const before = await readBatch(trx, id);
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const was = before.properties as FuelFacts;
		const changed = changedFields<Record<string, unknown>>({ ...was }, change);
		if (changed.length > 0) {
			const properties = Object.fromEntries(
				Object.entries({ ...was, ...change }).filter(([, property]) => property)
			);
			await trx
				.updateTable('fuelBatch')
				.set({ properties: jsonb(properties) as never, version: before.version + 1 })
				.where('id', '=', id)
				.execute();
			const of = (facts: object) =>
				Object.fromEntries(changed.map((name) => [name, (facts as Record<string, unknown>)[name] ?? null]));
			await recordAudit(trx, who, {
				action: 'batch.change',
				subject: 'fuel_batch',
				subjectId: id,
				clientId,
				before: of(was),
				after: { ...of(change), ...(reason ? { reason } : {}) }
			});
		}
		return { ...(await readBatch(trx, id)), behind: await runsBehind(trx, { fuelBatch: id }) };
	});
}

const SORTS: Readonly<Record<'code' | 'fuel' | 'added' | 'runs', SortKey>> = {
	code: { by: sql`b.code`, type: 'text' },
	fuel: { by: sql`f.code`, type: 'text' },
	added: { by: sql`b.created_at`, type: 'timestamptz' },
	runs: { by: RUNS, type: 'float8' }
};

export async function listFuelBatches(
	deps: Deps,
	who: Principal,
	query: z.output<typeof FuelBatchQuery> & { limit: number; cursor?: string | undefined }
) {
	const sorted = sortedBy(SORTS, query.sort ?? 'code', sql`b.id`);
	const rows = await reading(deps.pools, who, async (trx) => {
		let some = selectBatches(trx)
			.select(sorted.key.as('sortKey'))
			.orderBy(sorted.order)
			.limit(query.limit + 1);
		if (query.fuel) {
			const fuel = await resolve(trx, 'fuel', query.fuel, { field: 'fuel' });
			some = some.where('b.fuelId', '=', fuel.id);
		}
		if (query.client === 'lab') some = some.where('b.clientId', 'is', null);
		else if (query.client) {
			const client = await resolve(trx, 'client', query.client, { field: 'client' });
			some = some.where('b.clientId', '=', client.id);
		}
		if (query.q) some = some.where('b.code', 'ilike', containing(query.q));
		if (query.cursor) some = some.where(sorted.after(query.cursor));
		return some.execute();
	});
	const { items, nextCursor } = page(rows, query.limit, (row) => [row.sortKey, row.id]);
	return { items: items.map(toBatch), nextCursor };
}

export async function getFuelBatch(deps: Deps, who: Principal, ref: string): Promise<FuelBatch> {
	return reading(deps.pools, who, async (trx) => readBatch(trx, (await resolve(trx, 'fuel_batch', ref)).id));
}

export async function listFuelBatchVersions(
	deps: Deps,
	who: Principal,
	ref: string
): Promise<z.input<typeof FuelBatchVersions>['items']> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'fuel_batch', ref);
		const rows = await trx
			.selectFrom('fuelBatchVersion as v')
			.leftJoin('person as p', 'p.id', 'v.createdBy')
			.select([
				'v.version',
				'v.properties',
				'p.displayName as by',
				'v.createdAt as at',
				sql<number>`(select count(distinct r.id) from run r
					join reduction d on d.run_id = r.id and d.client_id = r.client_id and d.superseded_at is null
					where r.fuel_batch_id = v.fuel_batch_id
						and (d.inputs ->> 'fuelBatchVersion')::int = v.version)`.as('runs')
			])
			.where('v.fuelBatchId', '=', id)
			.orderBy('v.version', 'desc')
			.execute();
		return rows.map((row) => ({
			...row,
			properties: row.properties as FuelBatch['properties'],
			runs: Number(row.runs)
		}));
	});
}

/** Where a batch stands against its fuel's specification, against itself, and against rules of limit sets it may be judged by. */
export async function checkFuelBatch(
	deps: Deps,
	who: Principal,
	ref: string
): Promise<z.input<typeof FuelBatchCheck>> {
	const [{ facts, specification, client }, sets] = await Promise.all([
		reading(deps.pools, who, async (trx) => {
			const { id } = await resolve(trx, 'fuel_batch', ref);
			const row = await selectBatches(trx)
				.select('f.specification')
				.where('b.id', '=', id)
				.executeTakeFirstOrThrow();
			return {
				facts: row.properties as FuelFacts,
				specification: row.specification as unknown as Specification,
				client: row.client
			};
		}),
		listLimitSets(deps, who)
	]);
	return {
		specification: againstSpecification(facts, specification),
		disagreements: fuelDisagreements(facts),
		// A client's own rules judge its own runs, so they speak of the lab's batches and of its own.
		rules: sets
			.filter((set) => set.client === null || client === null || set.client === client)
			.flatMap((set) =>
				judgeFuel(set.rules, facts).map(({ rule, severity, message }) => ({
					limitSet: set.code,
					rule,
					severity,
					message
				}))
			)
	};
}

export async function fuelBatchHistory(deps: Deps, who: Principal, ref: string): Promise<History> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'fuel_batch', ref);
		return readHistory(trx, 'fuel_batch', id, batchChangesInWords);
	});
}

/** Runs whose figures were made with what was recorded of this batch before. */
export async function fuelBatchBehind(deps: Deps, who: Principal, ref: string): Promise<Behind> {
	return reading(deps.pools, who, async (trx) =>
		runsBehind(trx, { fuelBatch: (await resolve(trx, 'fuel_batch', ref)).id })
	);
}

/** Has them computed again with what is recorded now. */
export async function recomputeFuelBatch(deps: Deps, who: Principal, ref: string): Promise<Behind> {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'fuel_batch', ref);
		const behind = await recomputeBehind(trx, { fuelBatch: id });
		await recordAudit(trx, who, {
			action: 'batch.recompute',
			subject: 'fuel_batch',
			subjectId: id,
			clientId,
			after: { detail: `${behind.runs} runs queued`, ...behind }
		});
		return behind;
	});
}
