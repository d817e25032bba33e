import { BookingQuery, listBookings } from '$lib/server/bookings';
import { listCells } from '$lib/server/cells';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'booking.read');
	return pageData({ locals }, async () => {
		const given = Object.fromEntries([...url.searchParams].filter(([, value]) => value !== ''));
		const query = BookingQuery.safeParse(given).data ?? BookingQuery.parse({});
		const [bookings, cells] = await Promise.all([
			listBookings(locals.deps, who, query),
			listCells(locals.deps, who)
		]);
		const { state = '', cell = '', client = '', build = '', from = '', to = '' } = query;
		return {
			bookings,
			cells: cells.map(({ code, name }) => ({ code, name })),
			filters: { state, cell, client, build, from, to }
		};
	});
};
