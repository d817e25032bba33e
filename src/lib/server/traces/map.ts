import { z } from 'zod';
import type { Principal } from '../access';
import { fields } from '../api';
import { jsonb, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { conflict, notFound } from '../problem';
import { resolve } from '../refs';

const Column = z.object({
	index: z.number().int('give the column’s index, counted from 0').min(0).max(100_000),
	channel: fields.label(120).nullable(),
	unit: z.string().trim().max(40).nullable(),
	reference: z.enum(['gauge', 'absolute']).optional(),
	delayS: z.number().min(-600).max(600).optional()
});
export const TraceMap = z.object({ columns: z.array(Column).min(1, 'map at least one column').max(5000) });

/** A person's word on what the columns are; the figures are made again from the untouched original. */
export async function mapTrace(
	deps: Deps,
	who: Principal,
	runRef: string,
	traceId: string,
	input: z.output<typeof TraceMap>
) {
	return writing(deps.pools, who, async (trx) => {
		const { id: runId, clientId } = await resolve(trx, 'run', runRef);
		const run = await trx
			.selectFrom('run')
			.select(['number', 'state'])
			.where('id', '=', runId)
			.executeTakeFirstOrThrow();
		if (run.state === 'accepted' || run.state === 'voided')
			throw conflict(`Run ${run.number} is ${run.state}: its figures stay as they are.`);
		const mapped = await trx
			.updateTable('trace')
			.set({ columnMap: jsonb(input.columns) as never, state: 'received', error: null })
			.where('id', '=', z.uuid().safeParse(traceId).data ?? null)
			.where('runId', '=', runId)
			.returning(['id', 'filename'])
			.executeTakeFirst();
		if (!mapped) throw notFound('This trace');
		await recordAudit(trx, who, {
			action: 'trace.map',
			subject: 'run',
			subjectId: runId,
			clientId,
			after: { filename: mapped.filename, ...input }
		});
		await enqueue(trx, 'trace.process', { clientId: clientId!, traceId: mapped.id }, mapped.id);
		return { id: mapped.id, state: 'received' as const };
	});
}
