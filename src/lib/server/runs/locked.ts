import type { Trx } from '../db';
import { conflict, stale } from '../problem';
import { resolve } from '../refs';

/** A run that this transaction is about to change: nobody else changes it meanwhile. @throws Problem 412 when it has changed since */
export async function lockRun(trx: Trx, ref: string, ifMatch: number | null) {
	const { id, clientId } = await resolve(trx, 'run', ref);
	const run = await trx
		.selectFrom('run')
		.select(['id', 'number', 'state', 'loggedBy', 'version'])
		.where('id', '=', id)
		.forUpdate()
		.executeTakeFirstOrThrow();
	if (ifMatch !== null && ifMatch !== run.version) throw stale();
	return { ...run, clientId: clientId! };
}

/** @throws Problem 409 for a run that is accepted or void: its record stays as it was reviewed */
export function refuseDecided(run: { number: string; state: string }, what: string): void {
	if (run.state === 'accepted' || run.state === 'voided')
		throw conflict(`Run ${run.number} is ${run.state}: ${what}`);
}
