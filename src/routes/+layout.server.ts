import { actionsOf, type Action } from '$lib/server/access';
import { getClient } from '$lib/server/clients';
import type { LayoutServerLoad } from './$types';

/** What the frame shows. It guards nothing: layouts are not loaded on every navigation. */
export const load: LayoutServerLoad = async ({ locals, cookies }) => {
	const { who, deps, theme } = locals;
	const rail: 'wide' | 'narrow' = cookies.get('rail') === 'narrow' ? 'narrow' : 'wide';
	const nobodyMay: Action[] = [];
	if (!who)
		return {
			person: null,
			theme,
			rail,
			may: nobodyMay,
			zone: deps.config.labTimeZone,
			lab: deps.config.labName
		};
	const client = who.clientId ? await getClient(deps, who, who.clientId) : null;
	return {
		units: who.units,
		person: { name: who.name, role: who.role, client },
		theme,
		rail,
		may: actionsOf(who),
		zone: deps.config.labTimeZone,
		lab: deps.config.labName
	};
};
