import { SYSTEM, writing } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { accountLetters } from './account-letters';
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

/** The same for what happens to a person's own account. */
export async function notifyOfAccount(deps: Deps, job: JobData<'mail.account'>): Promise<void> {
	const { event, clientId, occasionId: subjectId } = job;
	await writing(deps.pools, SYSTEM, async (trx) => {
		await promise(trx, { event, clientId, subjectId, revision: 0 }, await accountLetters(trx, deps, job));
	});
}
