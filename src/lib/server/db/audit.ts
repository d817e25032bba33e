import type { Actor } from './as-person';
import { jsonb } from './ranges';
import type { Trx } from './pools';

export interface AuditEntry {
	action: string;
	subject: string;
	subjectId: string;
	clientId: string | null;
	before?: unknown;
	after?: unknown;
}

/** Who did what, in the transaction that does it. */
export async function recordAudit(trx: Trx, who: Actor, entry: AuditEntry): Promise<void> {
	await trx
		.insertInto('audit')
		.values({
			actorId: who.personId,
			clientId: entry.clientId,
			action: entry.action,
			subject: entry.subject,
			subjectId: entry.subjectId,
			before: entry.before === undefined ? null : (jsonb(entry.before) as never),
			after: entry.after === undefined ? null : (jsonb(entry.after) as never)
		})
		.execute();
}
