import { conflict, Problem } from '../problem';
import { jsonb } from './ranges';
import type { Trx } from './pools';

export interface KeyClaim {
	personId: string;
	key: string;
	/** Method and path: a key used again elsewhere is another request. */
	route: string;
	bodySha256: Buffer;
	taken: boolean;
}

export interface RememberedAnswer {
	status: number;
	answer: unknown;
}

/** Takes the key in the transaction that makes the effect: a second request with it waits here, then finds it taken. */
export async function claimKey(trx: Trx, claim: KeyClaim): Promise<void> {
	const { personId, key, route, bodySha256 } = claim;
	const taken = await trx
		.insertInto('idempotency')
		.values({ personId, key, route, bodySha256 })
		.onConflict((clash) => clash.columns(['personId', 'key']).doNothing())
		.returning('key')
		.executeTakeFirst();
	if (!taken) throw conflict('A request with this Idempotency-Key is being handled. Ask again in a moment.');
}

/** What was answered to this key before, if anything. @throws Problem 422 when the key came with another request */
export async function rememberedAnswer(trx: Trx, claim: KeyClaim): Promise<RememberedAnswer | null> {
	const row = await trx
		.selectFrom('idempotency')
		.select(['route', 'bodySha256', 'status', 'answer'])
		.where('personId', '=', claim.personId)
		.where('key', '=', claim.key)
		.executeTakeFirst();
	if (!row) return null;
	if (row.route !== claim.route || !row.bodySha256.equals(claim.bodySha256))
		throw new Problem(
			422,
			'Key used before',
			'This Idempotency-Key was used with another request. Use a new key.'
		);
	if (row.status === null)
		throw conflict(
			'A request with this Idempotency-Key took effect, and its answer was lost. Read the thing instead.'
		);
	return { status: row.status, answer: row.answer };
}

export async function rememberAnswer(
	trx: Trx,
	claim: KeyClaim,
	status: number,
	answer: unknown
): Promise<void> {
	await trx
		.updateTable('idempotency')
		.set({ status, answer: jsonb(answer ?? null) as never })
		.where('personId', '=', claim.personId)
		.where('key', '=', claim.key)
		.execute();
}
