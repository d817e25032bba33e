import { operation } from '$lib/server/api';
import { BookingView, declineBooking, Decision } from '$lib/server/bookings';

export const POST = operation({
	id: 'declineBooking',
	summary: 'Decline a request',
	action: 'booking.decide',
	body: Decision,
	answer: BookingView,
	run: ({ deps, who, params, body, ifMatch }) => declineBooking(deps, who, params.id!, { ...body, ifMatch })
});
