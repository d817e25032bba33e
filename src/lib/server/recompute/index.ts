import { sql } from 'kysely';
import { z } from 'zod';
import type { Trx } from '../db';
import { enqueue, PRIORITY } from '../jobs';

/** Runs whose current figures come from earlier values of what they depend on. */
export const BehindView = z.object({
	/** Would be computed again. */
	runs: z.number(),
	/** Accepted meanwhile: they keep the figures that were accepted. */
	accepted: z.number()
});
export type Behind = z.input<typeof BehindView>;

/** What figures depend on; each keeps its versions. */
type Source = { engine: string } | { fuelBatch: string };

interface Row {
	traceId: string;
	clientId: string;
	runId: string;
	accepted: boolean;
}

/** Of an engine's facts those that no figure is made with. */
const BESIDE_FIGURES = ['boreMm', 'strokeMm', 'compressionRatio'];

async function tracesBehind(trx: Trx, source: Source): Promise<Row[]> {
	const of =
		'engine' in source
			? sql`from build b
				join run r on r.build_id = b.id and r.client_id = b.client_id
				join reduction d on d.run_id = r.id and d.client_id = r.client_id and d.superseded_at is null
				join engine s on s.id = b.engine_id
				join engine_version now on now.engine_id = s.id and now.version = s.version
				left join engine_version used on used.engine_id = s.id
					and used.version = (d.inputs ->> 'engineVersion')::int
				where b.engine_id = ${source.engine}::uuid
					and (used.facts - ${BESIDE_FIGURES}::text[]) is distinct from (now.facts - ${BESIDE_FIGURES}::text[])`
			: sql`from run r
				join reduction d on d.run_id = r.id and d.client_id = r.client_id and d.superseded_at is null
				join fuel_batch s on s.id = r.fuel_batch_id
				left join fuel_batch_version used on used.fuel_batch_id = s.id
					and used.version = (d.inputs ->> 'fuelBatchVersion')::int
				where r.fuel_batch_id = ${source.fuelBatch}::uuid
					and used.properties is distinct from s.properties`;
	const { rows } = await sql<Row>`
		select d.trace_id, d.client_id, r.id as run_id, r.state = 'accepted' as accepted ${of}
			and r.state <> 'voided'
		order by r.started_at desc, d.trace_id`.execute(trx);
	return rows;
}

function countRuns(rows: readonly Row[]): Behind {
	const runs = new Map(rows.map(({ runId, accepted }) => [runId, accepted]));
	const accepted = [...runs.values()].filter(Boolean).length;
	return { runs: runs.size - accepted, accepted };
}

/** How many runs have figures from earlier values. */
export const runsBehind = async (trx: Trx, source: Source): Promise<Behind> =>
	countRuns(await tracesBehind(trx, source));

/** Queues their traces, behind users' work; what was computed before stays in each run's history. */
export async function recomputeBehind(trx: Trx, source: Source): Promise<Behind> {
	const rows = await tracesBehind(trx, source);
	for (const { traceId, clientId } of rows.filter(({ accepted }) => !accepted))
		await enqueue(trx, 'trace.process', { clientId, traceId }, traceId, { priority: PRIORITY.background });
	return countRuns(rows);
}
