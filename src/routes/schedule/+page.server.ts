import { fail } from '@sveltejs/kit';
import { z } from 'zod';
import { drawnEntries, listedEntries } from '$lib/components/schedule/entries';
import { droppedSpan, isDay, offsetText, SCHEDULE_VIEWS, shownDays } from '$lib/domain/scheduling';
import { getBooking, moveBooking } from '$lib/server/bookings';
import { problemOf } from '$lib/server/db';
import { readSchedule } from '$lib/server/schedule';
import { pageData, personMay } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url, depends }) => {
	const who = personMay(locals, 'schedule.read');
	const { deps } = locals;
	depends('app:schedule');
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
			cells: schedule.cells.map(({ code, name, rigUpMinutes, rigDownMinutes }) => ({
				code,
				name,
				rigUpMinutes,
				rigDownMinutes
			})),
			/** The one cell to be shown. */
			cell: schedule.cells.find(({ code }) => code === url.searchParams.get('cell'))?.code ?? null,
			drawn: drawnEntries(schedule, zone),
			listed: listedEntries(schedule)
		};
	});
};

const wallClock = z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d$/);
const MoveForm = z.object({
	id: z.string().min(1).max(100),
	cell: z.string().min(1).max(100),
	from: wallClock,
	to: wallClock,
	version: z.coerce.number().int().nonnegative()
});

export const actions: Actions = {
	/** A bar that was put down elsewhere; times are the lab's wall clock, as they were drawn. */
	move: async ({ request, locals }) => {
		const who = personMay(locals, 'booking.move');
		const { deps } = locals;
		const read = MoveForm.safeParse(Object.fromEntries(await request.formData()));
		if (!read.success) return fail(400, { problem: 'Name the booking, and the place it is to have.' });
		const { id, cell, version, ...drop } = read.data;
		try {
			const { cell: oldCell, from, to } = await getBooking(deps, who, id);
			const zone = deps.config.labTimeZone;
			const span = droppedSpan({ from: new Date(from), to: new Date(to) }, drop, zone);
			if (!span) return fail(400, { problem: `The clock of ${zone} never shows this time. Choose another.` });
			const after = await moveBooking(deps, who, id, { cell, ...span }, version);
			return {
				before: { cell: oldCell, from, to },
				after: {
					id: after.id,
					number: after.number,
					cell: after.cell,
					from: after.from,
					to: after.to,
					version: after.version
				},
				isAsked: after.replaces !== null && after.id !== id
			};
		} catch (cause) {
			const problem = problemOf(cause);
			if (!problem) throw cause;
			return fail(problem.status, { problem: problem.message });
		}
	}
};
