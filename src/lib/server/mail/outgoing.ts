import { sql } from 'kysely';
import type { Trx } from '../db';
import { enqueue, type JobData } from '../jobs';
import { CalendarFacts, type CalendarMethod } from './calendar';
import { bodyOf, oneLine, type Letter } from './text';

export interface Outgoing {
	recipientId: string;
	letter: Letter;
	calendar?: { facts: CalendarFacts; method: CalendarMethod };
}

interface Occasion {
	event: JobData<'mail.notify' | 'mail.account'>['event'];
	clientId: string | null;
	subjectId: string;
	revision: number;
}

/** Writes the mails and, in the same transaction, their sending. Run again it adds nothing: a mail is one per event and person. */
export async function promise(trx: Trx, event: Occasion, list: Outgoing[]): Promise<void> {
	for (const { recipientId, letter, calendar } of list) {
		const row = await trx
			.insertInto('mail')
			.values({
				clientId: event.clientId,
				kind: event.event,
				subjectId: event.subjectId,
				revision: event.revision,
				recipientId,
				subject: oneLine(letter.subject),
				body: bodyOf(letter),
				calendar: calendar ? JSON.stringify(calendar.facts) : null,
				calendarMethod: calendar?.method ?? null
			})
			.onConflict((clash) => clash.constraint('mail_once').doNothing())
			.returning('id')
			.executeTakeFirst();
		if (row) await enqueue(trx, 'mail.send', { clientId: event.clientId, mailId: row.id }, row.id);
	}
}

/** Those of these people who may still read this client's records. */
export async function entitled(trx: Trx, personIds: string[], clientId: string): Promise<string[]> {
	if (!personIds.length) return [];
	const rows = await trx
		.selectFrom('person')
		.select('id')
		.where('id', 'in', [...new Set(personIds)])
		.where('active', '=', true)
		.where((eb) => eb.or([eb('role', '<>', 'client'), eb('clientId', '=', clientId)]))
		.execute();
	return rows.map((row) => row.id);
}

export async function managers(trx: Trx): Promise<string[]> {
	const rows = await trx
		.selectFrom('person')
		.select('id')
		.where('role', '=', sql.lit('manager'))
		.where('active', '=', true)
		.execute();
	return rows.map((row) => row.id);
}
