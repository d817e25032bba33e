import { operation, pageOf } from '$lib/server/api';
import { AuditEntry, AuditQuery, readAudit } from '$lib/server/audit';

export const GET = operation({
	id: 'readAudit',
	summary: 'Who did what, newest first, with what it was before and after',
	action: 'audit.read',
	query: AuditQuery,
	answer: pageOf(AuditEntry),
	run: ({ deps, who, query }) => readAudit(deps, who, query)
});
