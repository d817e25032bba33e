import type { z } from 'zod';
import type { Principal } from '../access';
import { reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import { resolve } from '../refs';
import type { NewReading, Reading } from './schemas';

function selectReadings(trx: Trx) {
	return trx
		.selectFrom('airReading as a')
		.innerJoin('person as p', 'p.id', 'a.author')
		.select([
			'a.id',
			'a.at',
			'a.barometerKpa',
			'a.temperatureC',
			'a.humidityPct',
			'p.displayName as author',
			'a.supersedesId as supersedes',
			'a.reason'
		]);
}

/** Readings of the air in the cell, in the order of their clock; corrected ones stay among them. */
export async function listReadings(deps: Deps, who: Principal, runRef: string): Promise<Reading[]> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'run', runRef);
		return selectReadings(trx)
			.where('a.runId', '=', id)
			.orderBy('a.at')
			.orderBy('a.createdAt')
			.orderBy('a.id')
			.execute();
	});
}

/** A reading with its clock, or the correction of an earlier one. Figures use the record's own entry, not these. */
export async function addReading(
	deps: Deps,
	who: Principal,
	runRef: string,
	input: z.output<typeof NewReading>
): Promise<Reading> {
	const { at, supersedes, reason, ...air } = input;
	if (Object.values(air).every((value) => value === undefined))
		throw wrongField('barometerKpa', 'give at least one reading.');
	if (supersedes && !reason) throw wrongField('reason', 'say why the earlier reading is corrected.');
	return writing(deps.pools, who, async (trx) => {
		const { id: runId, clientId } = await resolve(trx, 'run', runRef);
		const earlier = supersedes
			? await trx
					.selectFrom('airReading')
					.select('at')
					.where('id', '=', supersedes)
					.where('runId', '=', runId)
					.executeTakeFirst()
			: null;
		if (earlier === undefined) throw wrongField('supersedes', 'there is no such reading in this run.');
		const { id } = await trx
			.insertInto('airReading')
			.values({
				clientId: clientId!,
				runId,
				// A correction says what was read then, not now.
				at: at ?? earlier?.at ?? deps.now(),
				...air,
				author: who.personId,
				supersedesId: supersedes ?? null,
				reason: supersedes ? reason! : null
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: supersedes ? 'air.correct' : 'air.read',
			subject: 'run',
			subjectId: runId,
			clientId,
			after: { detail: detailOf(air, supersedes ? reason : undefined), ...input }
		});
		return selectReadings(trx).where('a.id', '=', id).executeTakeFirstOrThrow();
	});
}

function detailOf(
	air: { barometerKpa?: number; temperatureC?: number; humidityPct?: number },
	reason?: string
) {
	const units = { barometerKpa: 'kPa', temperatureC: '°C', humidityPct: '% RH' } as const;
	const told = (Object.keys(units) as (keyof typeof units)[]).flatMap((name) =>
		air[name] === undefined ? [] : [`${air[name]} ${units[name]}`]
	);
	return `${told.join(', ')}${reason ? ` (${reason})` : ''}`;
}
