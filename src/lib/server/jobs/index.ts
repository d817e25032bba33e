import { sql } from 'kysely';
import { z } from 'zod';
import type { Trx } from '../db';

/** Every task the worker knows, with the shape of its payload: it is parsed again when it runs, since older code may have queued it. */
export const JOBS = {
	'trace.process': {
		payload: z.object({
			clientId: z.uuid(),
			traceId: z.uuid(),
			/** Of a run that is entered as history: nobody is mailed about its flags. */
			quiet: z.boolean().optional()
		}),
		attempts: 5
	},
	'mail.notify': {
		payload: z.object({
			clientId: z.uuid(),
			event: z.enum([
				'booking.requested',
				'booking.confirmed',
				'booking.declined',
				'booking.cancelled',
				'booking.moved',
				'run.flagged'
			]),
			subjectId: z.uuid(),
			/** Tells repeats of one event on one subject apart (a booking moved twice). */
			revision: z.number().int().nonnegative()
		}),
		attempts: 10
	},
	'mail.send': { payload: z.object({ clientId: z.uuid().nullable(), mailId: z.uuid() }), attempts: 14 }
} as const;

export type JobName = keyof typeof JOBS;
export type JobData<N extends JobName> = z.infer<(typeof JOBS)[N]['payload']>;

/** Lower runs sooner: a user's work always before the demo lab's. */
export const PRIORITY = { user: 0, background: 50 } as const;

/** Adds a job in the transaction that causes it: rolled back with it, and never lost once it is committed. */
export async function enqueue<N extends JobName>(
	trx: Trx,
	name: N,
	data: JobData<N>,
	key: string,
	options: { priority?: number; at?: Date } = {}
): Promise<void> {
	await sql`select jobs.enqueue(${name}::text, ${JSON.stringify(data)}::json, ${`${name}:${key}`}::text,
		${options.priority ?? PRIORITY.user}::integer, ${JOBS[name].attempts}::integer, ${options.at ?? null}::timestamptz)`.execute(
		trx
	);
}
