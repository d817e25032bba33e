import { listClients } from '$lib/server/clients';
import { listPeople, PersonQuery } from '$lib/server/people';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'person.admin');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		// An address that someone typed by hand with a wrong filter shows all, not an error page.
		const query = PersonQuery.safeParse(given).data ?? PersonQuery.parse({});
		const [people, clients] = await Promise.all([
			listPeople(locals.deps, who, query),
			listClients(locals.deps, who)
		]);
		const { role = '', client = '', state = '' } = query;
		return {
			people,
			clients: clients.map(({ code, name }) => ({ code, name })),
			filters: { role, client, state },
			sort: url.searchParams.get('sort') ?? ''
		};
	});
};
