import { operation, pageOf } from '$lib/server/api';
import { BookingQuery, BookingView, listBookings, NewBooking, requestBooking } from '$lib/server/bookings';

export const GET = operation({
	id: 'listBookings',
	summary: 'Bookings you may see, latest first',
	action: 'booking.read',
	query: BookingQuery,
	answer: pageOf(BookingView),
	run: ({ deps, who, query }) => listBookings(deps, who, query)
});

export const POST = operation({
	id: 'requestBooking',
	summary: 'Ask for a slot in a cell',
	action: 'booking.request',
	body: NewBooking,
	answer: BookingView,
	status: 201,
	run: ({ deps, who, body }) => requestBooking(deps, who, body)
});
