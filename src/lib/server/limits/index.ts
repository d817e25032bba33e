import type { z } from 'zod';
import type { Rule } from '$lib/domain/model';
import { periodsOf } from '$lib/domain/versions/periods';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { stale } from '../problem';
import { clientFor, resolve } from '../refs';
import type { NewLimitSet, NewLimitSetVersion } from './schemas';

export { LimitSetVersionView, LimitSetView, NewLimitSet, NewLimitSetVersion } from './schemas';

/** Each set with its newest version. */
function selectSets(trx: Trx) {
	return trx
		.selectFrom('limitSet as s')
		.innerJoin('limitSetVersion as v', 'v.limitSetId', 's.id')
		.leftJoin('client as c', 'c.id', 's.clientId')
		.distinctOn('s.id')
		.select(['s.id', 'c.code as client', 's.code', 's.title', 'v.version', 'v.inForceFrom', 'v.rules'])
		.orderBy('s.id')
		.orderBy('v.version', 'desc');
}

type Row = Awaited<ReturnType<ReturnType<typeof selectSets>['executeTakeFirstOrThrow']>>;
const toSet = (row: Row) => ({ ...row, rules: row.rules as unknown as Rule[] });

export async function createLimitSet(deps: Deps, who: Principal, input: z.output<typeof NewLimitSet>) {
	return writing(deps.pools, who, async (trx) => {
		const clientId = await clientFor(trx, who, input.client);
		const { id } = await trx
			.insertInto('limitSet')
			.values({ clientId, code: input.code, title: input.title })
			.returning('id')
			.executeTakeFirstOrThrow();
		await trx
			.insertInto('limitSetVersion')
			.values({ limitSetId: id, version: 1, rules: jsonb(input.rules) as never, createdBy: who.personId })
			.execute();
		await recordAudit(trx, who, {
			action: 'limits.create',
			subject: 'limit_set',
			subjectId: id,
			clientId,
			after: input
		});
		return toSet(await selectSets(trx).where('s.id', '=', id).executeTakeFirstOrThrow());
	});
}

/** Rules are never edited: a change is a new version, and earlier runs stay judged by theirs. */
export async function addLimitSetVersion(
	deps: Deps,
	who: Principal,
	ref: string,
	input: z.output<typeof NewLimitSetVersion>,
	ifMatch: number | null
) {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'limit_set', ref);
		const newest = await selectSets(trx).where('s.id', '=', id).executeTakeFirstOrThrow();
		if (ifMatch !== null && ifMatch !== newest.version) throw stale();
		await trx
			.insertInto('limitSetVersion')
			.values({
				limitSetId: id,
				version: newest.version + 1,
				rules: jsonb(input.rules) as never,
				createdBy: who.personId,
				inForceFrom: input.inForceFrom ?? deps.now()
			})
			.execute();
		await recordAudit(trx, who, {
			action: 'limits.version',
			subject: 'limit_set',
			subjectId: id,
			clientId,
			after: input
		});
		return toSet(await selectSets(trx).where('s.id', '=', id).executeTakeFirstOrThrow());
	});
}

export async function listLimitSets(deps: Deps, who: Principal) {
	const rows = await reading(deps.pools, who, (trx) => selectSets(trx).execute());
	return rows
		.map(toSet)
		.sort((a, b) => (a.client ?? '').localeCompare(b.client ?? '') || a.code.localeCompare(b.code));
}

export async function getLimitSet(deps: Deps, who: Principal, ref: string) {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'limit_set', ref);
		return toSet(await selectSets(trx).where('s.id', '=', id).executeTakeFirstOrThrow());
	});
}

/** Every version, newest first, with when runs are judged by it. */
export async function listLimitSetVersions(deps: Deps, who: Principal, ref: string) {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'limit_set', ref);
		const rows = await trx
			.selectFrom('limitSetVersion as v')
			.leftJoin('person as p', 'p.id', 'v.createdBy')
			.select(['v.version', 'v.inForceFrom', 'v.rules', 'v.createdAt', 'p.displayName'])
			.where('v.limitSetId', '=', id)
			.orderBy('v.version', 'desc')
			.execute();
		const dated = rows.map(({ version, inForceFrom }) => ({ version, validFrom: inForceFrom }));
		const periods = new Map(
			periodsOf(dated).map(({ version: { version, validFrom }, period }) => [
				version,
				// What ran before every version is judged by the first one, whatever its date.
				{ from: period.from ?? (version === 1 ? null : validFrom), to: period.to }
			])
		);
		return rows.map(({ rules, displayName, createdAt, version, inForceFrom }) => ({
			version,
			inForceFrom,
			inForce: periods.get(version) ?? null,
			writtenBy: displayName,
			writtenAt: createdAt,
			rules: rules as unknown as Rule[]
		}));
	});
}

/** The rules a run is judged by: the version in force at its start; none yet, the first. */
export async function rulesInForce(
	trx: Trx,
	limitSetId: string,
	at: Date
): Promise<{ version: number; rules: Rule[] }> {
	const versions = await trx
		.selectFrom('limitSetVersion')
		.select(['version', 'rules', 'inForceFrom'])
		.where('limitSetId', '=', limitSetId)
		.orderBy('inForceFrom', 'desc')
		.orderBy('version', 'desc')
		.execute();
	const chosen =
		versions.find((version) => version.inForceFrom <= at) ??
		versions.sort((a, b) => a.version - b.version)[0];
	if (!chosen) throw new Error(`limit set ${limitSetId} has no version`);
	return { version: chosen.version, rules: chosen.rules as unknown as Rule[] };
}
