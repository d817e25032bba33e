import { operation } from '$lib/server/api';
import { BookingView, cancelBooking, Decision } from '$lib/server/bookings';

export const POST = operation({
	id: 'cancelBooking',
	summary: 'Cancel a request or a slot',
	action: 'booking.cancel',
	body: Decision,
	answer: BookingView,
	run: ({ deps, who, params, body, ifMatch }) => cancelBooking(deps, who, params.id!, { ...body, ifMatch })
});
