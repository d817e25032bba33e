import { z } from 'zod';
import type { Curve } from '$lib/domain/model';
import type { Principal } from '../access';
import { fields } from '../api';
import { reading } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';

const MOST_CHOSEN = 5;
const MOST_OFFERED = 30;
/** Shown behind a curve before anybody has chosen. */
const PROPOSED = 2;

export const EarlierQuery = z.object({
	/** Numbers of the runs whose curves are wanted; without it the latest two that are not void. */
	runs: z
		.string()
		.max(400)
		.transform((text) => text.split(',').filter(Boolean))
		.refine((runs) => runs.length <= MOST_CHOSEN, `name at most ${MOST_CHOSEN} runs`)
		.optional()
});
export const EarlierView = z.object({
	runs: z.array(
		z.object({
			number: z.string(),
			state: z.enum(['open', 'closed', 'accepted', 'voided']),
			startedAt: fields.instantOut,
			/** Of those chosen; null of the others. */
			curve: z.record(z.string(), z.array(z.number().nullable())).nullable()
		})
	)
});

/** Runs of the same build that were started before this one and have a curve, newest first. */
export async function readEarlier(
	deps: Deps,
	who: Principal,
	runRef: string,
	query: z.output<typeof EarlierQuery>
): Promise<z.input<typeof EarlierView>> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'run', runRef);
		const run = await trx
			.selectFrom('run')
			.select(['buildId', 'startedAt'])
			.where('id', '=', id)
			.executeTakeFirstOrThrow();
		const rows = await trx
			.selectFrom('run as r')
			.innerJoin('trace as t', (on) => on.onRef('t.runId', '=', 'r.id').on('t.isPrimary', '=', true))
			.innerJoin('reduction as d', (on) =>
				on.onRef('d.traceId', '=', 't.id').on('d.supersededAt', 'is', null)
			)
			.select(['r.number', 'r.state', 'r.startedAt', 'd.curve'])
			.where('r.buildId', '=', run.buildId)
			.where('r.startedAt', '<', run.startedAt)
			.orderBy('r.startedAt', 'desc')
			.orderBy('r.id')
			.limit(MOST_OFFERED)
			.execute();
		const earlier = rows
			.map((row) => ({ ...row, curve: row.curve as unknown as Curve }))
			.filter(({ curve }) => (curve.speed?.length ?? 0) > 1);
		const wanted =
			query.runs ??
			earlier
				.filter(({ state }) => state !== 'voided')
				.slice(0, PROPOSED)
				.map(({ number }) => number);
		return {
			runs: earlier.map(({ number, state, startedAt, curve }) => ({
				number,
				state: state as 'open',
				startedAt,
				curve: wanted.includes(number) ? curve : null
			}))
		};
	});
}
