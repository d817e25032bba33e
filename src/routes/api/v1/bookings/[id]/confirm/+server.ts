import { operation } from '$lib/server/api';
import { BookingView, confirmBooking, Decision } from '$lib/server/bookings';

export const POST = operation({
	id: 'confirmBooking',
	summary: 'Make a request a slot that nobody else can hold',
	action: 'booking.decide',
	body: Decision,
	answer: BookingView,
	run: ({ deps, who, params, body, ifMatch }) => confirmBooking(deps, who, params.id!, { ...body, ifMatch })
});
