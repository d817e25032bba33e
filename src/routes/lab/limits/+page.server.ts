import { listLimitSets } from '$lib/server/limits';
import { listing, pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

type LimitSet = Awaited<ReturnType<typeof listLimitSets>>[number];
const SORTS = {
	code: (set: LimitSet) => set.code,
	title: (set: LimitSet) => set.title,
	client: (set: LimitSet) => set.client ?? '',
	version: (set: LimitSet) => set.version,
	since: (set: LimitSet) => set.inForceFrom.getTime(),
	rules: (set: LimitSet) => set.rules.length
};
/** In the address: sets that are the lab's, for all clients. */
const LAB = 'lab';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => {
		const all = await listLimitSets(locals.deps, who);
		const client = url.searchParams.get('client') ?? '';
		const words = (url.searchParams.get('q') ?? '').trim().slice(0, 100);
		const asked = words.toLowerCase();
		const sets = all.filter(
			(set) =>
				(!client || (client === LAB ? !set.client : set.client === client)) &&
				[set.code, set.title, ...set.rules.map(({ title }) => title)].some((text) =>
					text.toLowerCase().includes(asked)
				)
		);
		return {
			...listing(sets, url, SORTS),
			none: all.length === 0,
			filters: { client, words },
			clients: [...new Set(all.flatMap((set) => set.client ?? []))].sort()
		};
	});
};
