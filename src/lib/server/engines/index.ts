import { sql } from 'kysely';
import type { z } from 'zod';
import { ENGINE_WORDS } from '$lib/domain/builds/engine-words';
import { changedFields, changesInWords } from '$lib/domain/history/changes';
import type { Principal } from '../access';
import { containing, page, sortedBy, type SortKey } from '../api';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { readHistory, type History } from '../history';
import { stale, wrongField } from '../problem';
import { recomputeBehind, runsBehind, type Behind } from '../recompute';
import { clientFor, resolve } from '../refs';
import {
	NEEDS_INDUCTION,
	type EngineChange,
	type EngineFields,
	type EngineQuery,
	type NewEngine
} from './schemas';

export {
	ChangedEngine,
	EngineChange,
	EngineQuery,
	EngineView,
	NewEngine,
	type EngineFields
} from './schemas';

const BUILDS = sql<number>`(select count(*) from build b where b.engine_id = e.id and b.client_id = e.client_id)`;
const RUNS = sql<number>`(select count(*) from build b join run r on r.build_id = b.id and r.client_id = b.client_id
	where b.engine_id = e.id and b.client_id = e.client_id)`;

function selectEngines(trx: Trx) {
	return trx
		.selectFrom('engine as e')
		.innerJoin('client as c', 'c.id', 'e.clientId')
		.select([
			'e.id',
			'c.code as client',
			'e.code',
			'e.name',
			'e.displacementL',
			'e.cylinders',
			'e.strokesPerCycle',
			'e.ignition',
			'e.inertiaKgM2',
			'e.induction',
			'e.boreMm',
			'e.strokeMm',
			'e.compressionRatio',
			'e.maxSpeedRpm',
			'e.expectedTorque',
			'e.version',
			BUILDS.as('builds'),
			RUNS.as('runs')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectEngines>['executeTakeFirstOrThrow']>>;
const toEngine = (row: Row): EngineFields => ({
	...row,
	ignition: row.ignition as EngineFields['ignition'],
	induction: row.induction as EngineFields['induction'],
	expectedTorque: row.expectedTorque as EngineFields['expectedTorque'],
	builds: Number(row.builds),
	runs: Number(row.runs)
});
const readEngine = async (trx: Trx, id: string): Promise<EngineFields> =>
	toEngine(await selectEngines(trx).where('e.id', '=', id).executeTakeFirstOrThrow());

export async function createEngine(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewEngine>
): Promise<EngineFields> {
	const { client, expectedTorque, ...facts } = input;
	return writing(deps.pools, who, async (trx) => {
		const clientId = await clientFor(trx, who, client);
		if (!clientId) throw wrongField('client', 'say whose engine this is.');
		const { id } = await trx
			.insertInto('engine')
			.values({
				...facts,
				clientId,
				expectedTorque: expectedTorque ? (jsonb(expectedTorque) as never) : null
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'engine.create',
			subject: 'engine',
			subjectId: id,
			clientId,
			after: input
		});
		return readEngine(trx, id);
	});
}

/**
 * Changes an engine. What earlier figures were made with stays as a version of it; they change only when that is asked for,
 * so the answer says how many runs have such figures.
 */
export async function changeEngine(
	deps: Deps,
	who: Principal,
	ref: string,
	{ reason, ...change }: z.output<typeof EngineChange>,
	ifMatch: number | null
): Promise<EngineFields & { behind: Behind }> {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'engine', ref);
		await trx.selectFrom('engine').select('id').where('id', '=', id).forUpdate().execute();
		const before = await readEngine(trx, id);
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const after = { ...before, ...change };
		if (after.ignition === 'compression' && !after.induction) throw wrongField('induction', NEEDS_INDUCTION);
		const changed = changedFields(before, change as Partial<EngineFields>);
		if (changed.length > 0) {
			const { expectedTorque, ...facts } = change;
			await trx
				.updateTable('engine')
				.set({
					...facts,
					...(expectedTorque === undefined
						? {}
						: { expectedTorque: expectedTorque ? (jsonb(expectedTorque) as never) : null }),
					version: before.version + 1
				})
				.where('id', '=', id)
				.execute();
			const of = (engine: EngineFields) => Object.fromEntries(changed.map((field) => [field, engine[field]]));
			await recordAudit(trx, who, {
				action: 'engine.change',
				subject: 'engine',
				subjectId: id,
				clientId,
				before: of(before),
				after: { ...of(after as EngineFields), ...(reason ? { reason } : {}) }
			});
		}
		return { ...(await readEngine(trx, id)), behind: await runsBehind(trx, { engine: id }) };
	});
}

const SORTS: Readonly<Record<'code' | 'name' | 'displacement' | 'builds' | 'runs', SortKey>> = {
	code: { by: sql`e.code`, type: 'text' },
	name: { by: sql`lower(e.name)`, type: 'text' },
	displacement: { by: sql`e.displacement_l`, type: 'float8' },
	builds: { by: BUILDS, type: 'float8' },
	runs: { by: RUNS, type: 'float8' }
};

/** All engines this person may see, for a choice among them; by client and code. */
export async function listEngines(deps: Deps, who: Principal): Promise<EngineFields[]> {
	const rows = await reading(deps.pools, who, (trx) =>
		selectEngines(trx).orderBy('c.code').orderBy('e.code').execute()
	);
	return rows.map(toEngine);
}

/** A table of engines: filtered, sorted, page by page. */
export async function pageEngines(
	deps: Deps,
	who: Principal,
	query: z.output<typeof EngineQuery> & { limit: number }
) {
	const sorted = sortedBy(SORTS, query.sort ?? 'code', sql`e.id`);
	const rows = await reading(deps.pools, who, async (trx) => {
		let some = selectEngines(trx)
			.select(sorted.key.as('sortKey'))
			.orderBy(sorted.order)
			.limit(query.limit + 1);
		if (query.client) {
			const client = await resolve(trx, 'client', query.client, { field: 'client' });
			some = some.where('e.clientId', '=', client.id);
		}
		if (query.q) {
			const part = containing(query.q);
			some = some.where((eb) => eb.or([eb('e.code', 'ilike', part), eb('e.name', 'ilike', part)]));
		}
		if (query.cursor) some = some.where(sorted.after(query.cursor));
		return some.execute();
	});
	const { items, nextCursor } = page(rows, query.limit, (row) => [row.sortKey, row.id]);
	return { items: items.map(toEngine), nextCursor };
}

export async function getEngine(deps: Deps, who: Principal, ref: string): Promise<EngineFields> {
	return reading(deps.pools, who, async (trx) => readEngine(trx, (await resolve(trx, 'engine', ref)).id));
}

export async function engineHistory(deps: Deps, who: Principal, ref: string): Promise<History> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'engine', ref);
		return readHistory(trx, 'engine', id, (before, after) => changesInWords(before, after, ENGINE_WORDS));
	});
}

/** Runs whose figures were made with what this engine was recorded as before. */
export async function engineBehind(deps: Deps, who: Principal, ref: string): Promise<Behind> {
	return reading(deps.pools, who, async (trx) =>
		runsBehind(trx, { engine: (await resolve(trx, 'engine', ref)).id })
	);
}

/** Has them computed again with the engine as it is recorded now. */
export async function recomputeEngine(deps: Deps, who: Principal, ref: string): Promise<Behind> {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'engine', ref);
		const behind = await recomputeBehind(trx, { engine: id });
		await recordAudit(trx, who, {
			action: 'engine.recompute',
			subject: 'engine',
			subjectId: id,
			clientId,
			after: { detail: `${behind.runs} runs queued`, ...behind }
		});
		return behind;
	});
}
