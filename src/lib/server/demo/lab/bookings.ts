import type { DemoBooking } from './booking';
import { HISTORY } from './history';
import { OTHER_BOOKINGS } from './other-bookings';

/** Every booking of the demo lab. */
export const DEMO_BOOKINGS: readonly DemoBooking[] = [...HISTORY.bookings, ...OTHER_BOOKINGS];
