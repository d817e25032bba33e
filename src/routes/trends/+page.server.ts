import { runChoices } from '$lib/server/runs';
import { listMetricCodes } from '$lib/server/trends';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

/** Only the choosers; the trend itself is fetched by the page from the API, so that a change of question reloads nothing else. */
export const load: PageServerLoad = async ({ locals }) => {
	const who = personMay(locals, 'trend.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [metrics, choices] = await Promise.all([listMetricCodes(deps, who), runChoices(deps, who)]);
		return { metrics, choices };
	});
};
