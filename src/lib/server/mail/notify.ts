import { SYSTEM, writing } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { bookingLetters } from './booking-letters';
import { promise } from './outgoing';
import { runLetters } from './run-letters';

/** Turns an event into one mail for each person it concerns. Safe to run twice. */
export async function notify(deps: Deps, event: JobData<'mail.notify'>): Promise<void> {
	await writing(deps.pools, SYSTEM, async (trx) => {
		const letters = event.event === 'run.flagged' ? runLetters : bookingLetters;
		await promise(trx, event, await letters(trx, deps, event));
	});
}
