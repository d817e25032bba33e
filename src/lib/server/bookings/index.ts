export { closeCell, removeClosure } from './closures';
export { cancelBooking, confirmBooking, declineBooking } from './decide';
export { moveBooking } from './move';
export { getBooking, listBookings } from './read';
export { requestBooking } from './request';
export {
	BookingMove,
	BookingQuery,
	BookingView,
	ClosureView,
	Decision,
	NewBooking,
	NewClosure,
	type Booking
} from './schemas';
export { standingOf } from './view';
