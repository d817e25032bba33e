import { AUDIT_SUBJECTS, AuditQuery, listActors, readAudit } from '$lib/server/audit';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'audit.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		const query = AuditQuery.safeParse(given).data ?? AuditQuery.parse({});
		const [trail, people] = await Promise.all([
			readAudit(locals.deps, who, query),
			listActors(locals.deps, who)
		]);
		const { person = '', subject = '', subjectId = '', from = '', to = '' } = query;
		return { trail, people, subjects: AUDIT_SUBJECTS, filters: { person, subject, subjectId, from, to } };
	});
};
