import type { Principal } from '../access';
import { reading } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';

/** The limit set that the engine's runs were last held against, those of this build before others; null before there was one. */
export async function proposeLimitSet(deps: Deps, who: Principal, buildRef: string): Promise<string | null> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'build', buildRef);
		const last = await trx
			.selectFrom('run as r')
			.innerJoin('build as b', 'b.id', 'r.buildId')
			.select('r.limitSetId')
			.where('b.engineId', '=', (of) => of.selectFrom('build').select('engineId').where('id', '=', id))
			.where('r.limitSetId', 'is not', null)
			.orderBy((eb) => eb('r.buildId', '=', id), 'desc')
			.orderBy('r.startedAt', 'desc')
			.limit(1)
			.executeTakeFirst();
		return last?.limitSetId ?? null;
	});
}
