import { operation } from '$lib/server/api';
import { engineHours, HoursView } from '$lib/server/builds';

export const GET = operation({
	id: 'getEngineHours',
	summary: 'Running hours of an engine over all its builds',
	action: 'engine.read',
	answer: HoursView,
	run: ({ deps, who, params }) => engineHours(deps, who, params.id!)
});
