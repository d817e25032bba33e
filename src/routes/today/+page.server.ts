import { readToday } from '$lib/server/today';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, depends }) => {
	const who = personMay(locals, 'schedule.read');
	depends('app:today');
	return pageData({ locals }, async () => ({ today: await readToday(locals.deps, who) }));
};
