import { sql } from 'kysely';
import type { Trx } from './pools';

/**
 * The next number of a client's series, e.g. `HB-R-0017`: per client, so that it tells nothing of others' work.
 * Take it after the locks; it holds the client's counter row until commit.
 */
export async function nextNumber(trx: Trx, clientId: string, kind: 'R' | 'B'): Promise<string> {
	const { code } = await trx
		.selectFrom('client')
		.select('code')
		.where('id', '=', clientId)
		.executeTakeFirstOrThrow();
	const { last } = await trx
		.insertInto('counter')
		.values({ clientId, kind, last: 1 })
		.onConflict((clash) => clash.columns(['clientId', 'kind']).doUpdateSet({ last: sql`counter.last + 1` }))
		.returning('last')
		.executeTakeFirstOrThrow();
	return `${code}-${kind}-${String(last).padStart(4, '0')}`;
}
