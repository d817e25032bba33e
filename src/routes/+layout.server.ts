import { actionsOf, type Action } from '$lib/server/access';
import { cellColours } from '$lib/server/cells';
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
			cellColours: {},
			zone: deps.config.labTimeZone,
			lab: deps.config.labName
		};
	const [client, colours] = await Promise.all([
		who.clientId ? getClient(deps, who, who.clientId) : null,
		cellColours(deps, who)
	]);
	return {
		units: who.units,
		person: { name: who.name, role: who.role, client },
		theme,
		rail,
		may: actionsOf(who),
		cellColours: colours,
		zone: deps.config.labTimeZone,
		lab: deps.config.labName
	};
};
