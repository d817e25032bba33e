import { SYSTEM, writing } from '../db';
import type { Deps } from '../deps';
import { enqueue, PRIORITY } from '../jobs';

/** Queues every trace that has figures, behind users' work; what was computed before stays in history. */
export async function recomputeAll(deps: Deps): Promise<number> {
	return writing(deps.pools, SYSTEM, async (trx) => {
		const traces = await trx
			.selectFrom('trace')
			.select(['id', 'clientId'])
			.where('state', 'in', ['ready', 'needs_map', 'refused'])
			.execute();
		for (const { id, clientId } of traces)
			await enqueue(trx, 'trace.process', { clientId, traceId: id }, id, { priority: PRIORITY.background });
		return traces.length;
	});
}
