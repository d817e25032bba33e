import type { z } from 'zod';
import type { Correction } from '$lib/domain/model';
import type { Principal } from '../access';
import { jsonb, nextNumber, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import { clientFor, resolve } from '../refs';
import { readRun } from './read';
import type { NewRun, RunDetail } from './schemas';

/**
 * Opens a run's record. It records and does not gate: a cell in use by another run, a build not ready or a missing
 * checklist are for people to see, never a reason to lose the record.
 */
export async function openRun(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewRun>
): Promise<RunDetail> {
	return writing(deps.pools, who, async (trx) => {
		const named = await clientFor(trx, who, input.client);
		const build = await resolve(trx, 'build', input.build, { field: 'build', clientId: named });
		const clientId = build.clientId!;
		const cell = await resolve(trx, 'cell', input.cell, { field: 'cell' });
		const batch = await resolve(trx, 'fuel_batch', input.fuelBatch, { field: 'fuelBatch', clientId });
		const booking = input.booking
			? await resolve(trx, 'booking', input.booking, { field: 'booking', clientId })
			: null;
		const limitSet = input.limitSet
			? await resolve(trx, 'limit_set', input.limitSet, { field: 'limitSet', clientId })
			: null;
		await refuseCorrection(trx, build.id, input.correction);
		const number = await nextNumber(trx, clientId, 'R');
		const { id } = await trx
			.insertInto('run')
			.values({
				clientId,
				number,
				buildId: build.id,
				cellId: cell.id,
				fuelBatchId: batch.id,
				bookingId: booking?.id ?? null,
				limitSetId: limitSet?.id ?? null,
				kind: input.kind,
				correction: input.correction,
				net: input.net ?? null,
				ambient: jsonb(input.ambient) as never,
				settings: jsonb(input.settings) as never,
				startedAt: input.startedAt,
				loggedBy: who.personId
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'run.open',
			subject: 'run',
			subjectId: id,
			clientId,
			after: input
		});
		return readRun(trx, id);
	});
}

/** @throws Problem 400 for a correction whose form is not kept here for this engine */
export async function refuseCorrection(trx: Trx, buildId: string, correction: Correction): Promise<void> {
	if (correction !== 'sae_j1349') return;
	const engine = await trx
		.selectFrom('build as b')
		.innerJoin('engine as e', 'e.id', 'b.engineId')
		.select(['e.ignition'])
		.where('b.id', '=', buildId)
		.executeTakeFirstOrThrow();
	if (engine.ignition === 'compression')
		throw wrongField(
			'correction',
			'the SAE J1349 form kept here is for spark ignition; use iso_1585 for this engine.'
		);
}
