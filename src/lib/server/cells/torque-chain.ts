import { sql } from 'kysely';
import type { z } from 'zod';
import { periodsOf, reachOf, type Period } from '$lib/domain/versions/periods';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { enqueue, PRIORITY } from '../jobs';
import { stale } from '../problem';
import { resolve } from '../refs';
import { chainDates, chainViews, insertChain, lockCell } from './chain-rows';
import type { NewTorqueChain, TorqueChain, Touched } from './schemas';

const NAMED_AT_MOST = 20;

export async function listTorqueChain(deps: Deps, who: Principal, ref: string): Promise<TorqueChain[]> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		return chainViews(trx, who, id);
	});
}

interface Force {
	version: number;
	period: Period;
}

/** Traces whose current figures come from another version than the one that `forces` says for their run's start; newest run first. */
async function tracesBehind(trx: Trx, cellId: string, forces: readonly Force[]) {
	const table = jsonb(
		forces.map(({ version, period }) => ({ version, from_at: period.from, to_at: period.to }))
	);
	const { rows } = await sql<{
		traceId: string;
		clientId: string;
		number: string;
		client: string;
		startedAt: Date;
		version: number;
	}>`
		select t.id as trace_id, t.client_id, r.number, c.code as client, r.started_at, used.version
		from jsonb_to_recordset(${table}) f(version int, from_at timestamptz, to_at timestamptz)
		join run r on r.cell_id = ${cellId}::uuid
			and (f.from_at is null or r.started_at >= f.from_at) and (f.to_at is null or r.started_at < f.to_at)
		join reduction d on d.run_id = r.id and d.client_id = r.client_id and d.superseded_at is null
		join trace t on t.id = d.trace_id
		join client c on c.id = r.client_id
		-- Figures from before there were versions come from the first.
		cross join lateral (select coalesce((d.inputs ->> 'torqueChainVersion')::int, 1) as version) used
		where used.version <> f.version
		order by r.started_at desc, r.number`.execute(trx);
	return rows;
}
type Behind = Awaited<ReturnType<typeof tracesBehind>>;

function touchedOf(rows: Behind): Touched {
	const byRun = new Map(
		rows.map(({ number, client, startedAt, version }) => [number, { number, client, startedAt, version }])
	);
	return { runs: byRun.size, traces: rows.length, items: [...byRun.values()].slice(0, NAMED_AT_MOST) };
}

const forcesOf = (versions: Awaited<ReturnType<typeof chainDates>>): Force[] =>
	periodsOf(versions).map(({ version: { version }, period }) => ({ version, period }));

/** Runs that a version valid from this instant would change the figures of. */
export async function runsTouchedBy(
	deps: Deps,
	who: Principal,
	ref: string,
	validFrom: Date
): Promise<Touched> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		return touchedOf(await reachedBy(trx, id, validFrom));
	});
}

async function reachedBy(trx: Trx, cellId: string, validFrom: Date): Promise<Behind> {
	const versions = await chainDates(trx, cellId);
	// A version that is not written yet: no figure can come from it.
	return tracesBehind(trx, cellId, [{ version: 0, period: reachOf(versions, validFrom) }]);
}

/** Runs whose figures are older than the torque chain that is now in force at their start. */
export async function runsBehind(deps: Deps, who: Principal, ref: string): Promise<Touched> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		return touchedOf(await tracesBehind(trx, id, forcesOf(await chainDates(trx, id))));
	});
}

async function queueAgain(trx: Trx, rows: Behind): Promise<number> {
	for (const { traceId, clientId } of rows)
		await enqueue(trx, 'trace.process', { clientId, traceId }, traceId, { priority: PRIORITY.background });
	return rows.length;
}

/** A new version; earlier ones stay as they were written. Figures of the past change only when that is asked for. */
export async function addTorqueChain(
	deps: Deps,
	who: Principal,
	ref: string,
	input: z.output<typeof NewTorqueChain>,
	ifMatch: number | null
) {
	const { validFrom = deps.now(), reason, recompute, ...chain } = input;
	return writing(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		await lockCell(trx, id);
		const newest = (await chainDates(trx, id)).at(-1)!.version;
		if (ifMatch !== null && ifMatch !== newest) throw stale();
		const reached = await reachedBy(trx, id, validFrom);
		const version = newest + 1;
		await insertChain(trx, who, { cellId: id, version, validFrom, reason }, chain);
		await trx
			.updateTable('cell')
			.set((eb) => ({ version: eb('version', '+', 1) }))
			.where('id', '=', id)
			.execute();
		const recomputing = recompute ? await queueAgain(trx, reached) : 0;
		await recordAudit(trx, who, {
			action: 'cell.torque_chain',
			subject: 'cell',
			subjectId: id,
			clientId: null,
			after: { ...input, version, validFrom, recomputing }
		});
		const written = (await chainViews(trx, who, id)).find((each) => each.version === version)!;
		return { ...written, touched: touchedOf(reached), recomputing };
	});
}

/** Queues every trace of the cell whose figures come from another torque chain than the one in force at its run's start. */
export async function recomputeCell(deps: Deps, who: Principal, ref: string): Promise<{ traces: number }> {
	return writing(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		const traces = await queueAgain(trx, await tracesBehind(trx, id, forcesOf(await chainDates(trx, id))));
		await recordAudit(trx, who, {
			action: 'cell.recompute',
			subject: 'cell',
			subjectId: id,
			clientId: null,
			after: { traces }
		});
		return { traces };
	});
}
