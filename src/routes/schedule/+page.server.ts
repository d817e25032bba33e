import { drawnEntries, listedEntries } from '$lib/components/schedule/entries';
import { isDay, offsetText, SCHEDULE_VIEWS, shownDays } from '$lib/domain/scheduling';
import { readSchedule } from '$lib/server/schedule';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'schedule.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const zone = deps.config.labTimeZone;
		const now = deps.now();
		const asked = url.searchParams.get('date') ?? '';
		const view = SCHEDULE_VIEWS.find((each) => each === url.searchParams.get('view')) ?? 'week';
		const shown = shownDays(view, asked, now, zone);
		const schedule = await readSchedule(deps, who, { from: shown.first, to: shown.end });
		return {
			shown,
			/** What the address asked for instead of a day. */
			noDay: asked !== '' && !isDay(asked) ? asked.slice(0, 40) : null,
			from: schedule.from,
			offset: offsetText(now, zone),
			cells: schedule.cells.map(({ code, name }) => ({ code, name })),
			drawn: drawnEntries(schedule, zone),
			listed: listedEntries(schedule)
		};
	});
};
