import { z } from 'zod';
import type { Principal } from '../access';
import { recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { conflict, notFound, wrongField } from '../problem';
import { resolve } from '../refs';

export const TracePlace = z.object({
	/** Its figures become the run's; another trace's stand back. */
	primary: z.literal(true, { error: 'choose another trace as the primary one instead' }).optional(),
	/** How long after the run's start this trace's clock reads zero, s. */
	timeOffsetS: z
		.number()
		.min(-86_400, 'is in s: at most a day either way')
		.max(86_400, 'is in s: at most a day either way')
		.optional()
});

/** Chooses the trace whose figures are the run's, or says where a trace's clock lies on the run's. */
export async function placeTrace(
	deps: Deps,
	who: Principal,
	runRef: string,
	traceId: string,
	input: z.output<typeof TracePlace>
) {
	return writing(deps.pools, who, async (trx) => {
		const { id: runId, clientId } = await resolve(trx, 'run', runRef);
		// Traces before their run and in one order, as those who compute figures lock them: nobody waits in a circle.
		const traces = await trx
			.selectFrom('trace')
			.select(['id', 'filename', 'state', 'isPrimary', 'timeOffsetS'])
			.where('runId', '=', runId)
			.orderBy('id')
			.forUpdate()
			.execute();
		const run = await trx
			.selectFrom('run')
			.select(['number', 'state', 'version'])
			.where('id', '=', runId)
			.forUpdate()
			.executeTakeFirstOrThrow();
		const trace = traces.find(({ id }) => id === traceId);
		if (!trace) throw notFound('This trace');
		if (run.state === 'accepted' || run.state === 'voided')
			throw conflict(`Run ${run.number} is ${run.state}: its figures stay as they are.`);
		const told: [action: string, detail: string][] = [];
		if (input.primary && !trace.isPrimary) {
			if (!(await hasFigures(trx, trace.id)))
				throw wrongField('primary', `the trace ${trace.filename} is ${trace.state}; it has no figures.`);
			for (const { id } of traces.filter((other) => other.isPrimary))
				await trx.updateTable('trace').set({ isPrimary: false }).where('id', '=', id).execute();
			await makePrimary(trx, runId, trace.id);
			told.push(['trace.primary', trace.filename]);
		}
		if (input.timeOffsetS !== undefined && input.timeOffsetS !== trace.timeOffsetS) {
			await trx
				.updateTable('trace')
				.set({ timeOffsetS: input.timeOffsetS })
				.where('id', '=', trace.id)
				.execute();
			told.push(['trace.offset', `${trace.filename}: ${input.timeOffsetS} s after the run’s start`]);
		}
		for (const [action, detail] of told)
			await recordAudit(trx, who, {
				action,
				subject: 'run',
				subjectId: runId,
				clientId,
				before: { timeOffsetS: trace.timeOffsetS },
				after: { detail, traceId: trace.id, ...input }
			});
		if (told.length)
			await trx
				.updateTable('run')
				.set({ version: run.version + 1 })
				.where('id', '=', runId)
				.execute();
		return {
			id: trace.id,
			primary: trace.isPrimary || input.primary === true,
			timeOffsetS: input.timeOffsetS ?? trace.timeOffsetS
		};
	});
}

/** Figures that are being made again are figures still. */
async function hasFigures(trx: Trx, traceId: string): Promise<boolean> {
	const current = await trx
		.selectFrom('reduction')
		.select('id')
		.where('traceId', '=', traceId)
		.where('supersededAt', 'is', null)
		.executeTakeFirst();
	return current !== undefined;
}

/** Lists and trends read the metrics that are current: those of the one primary trace. */
async function makePrimary(trx: Trx, runId: string, traceId: string): Promise<void> {
	await trx.updateTable('trace').set({ isPrimary: true }).where('id', '=', traceId).execute();
	await trx.updateTable('metric').set({ isCurrent: false }).where('runId', '=', runId).execute();
	await trx
		.updateTable('metric')
		.set({ isCurrent: true })
		.where('reductionId', 'in', (of) =>
			of.selectFrom('reduction').select('id').where('traceId', '=', traceId).where('supersededAt', 'is', null)
		)
		.execute();
}
