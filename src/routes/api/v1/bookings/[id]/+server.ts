import { operation } from '$lib/server/api';
import { BookingMove, BookingView, getBooking, moveBooking } from '$lib/server/bookings';

export const GET = operation({
	id: 'getBooking',
	summary: 'One booking',
	action: 'booking.read',
	answer: BookingView,
	run: ({ deps, who, params }) => getBooking(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'moveBooking',
	summary: 'Another time or cell; moving a confirmed slot is a new request unless a manager does it',
	action: 'booking.move',
	body: BookingMove,
	answer: BookingView,
	run: ({ deps, who, params, body, ifMatch }) => moveBooking(deps, who, params.id!, body, ifMatch)
});
