import { confirmBooking, listBookings, NewBooking, requestBooking, type Booking } from '../bookings';
import type { Deps } from '../deps';
import { labTime } from './calendar';
import { DEMO_BOOKINGS } from './lab/bookings';
import type { Cast } from './people';

const DAY_MS = 24 * 3_600_000;
/** Clocks of a customer's request and of the manager's answer, before the slot. */
const ASKED_BEFORE_MS = 8 * DAY_MS;
const ANSWERED_BEFORE_MS = 7 * DAY_MS;

/** Adds the bookings that are missing, as history: nobody is mailed about them. @returns their numbers by key */
export async function addBookings(deps: Deps, cast: Cast, begun: Date): Promise<Map<string, string>> {
	const zone = deps.config.labTimeZone;
	const known = (await listBookings(deps, cast('manager'), { limit: 500 })).items;
	const numbers = new Map<string, string>();
	for (const plan of DEMO_BOOKINGS) {
		const from = labTime(begun, zone, plan.workday, plan.from);
		const to = labTime(begun, zone, plan.workday, plan.to);
		// Nothing was asked or answered after the day on which this lab began.
		const clock = (beforeMs: number) =>
			new Date(Math.min(from.getTime() - beforeMs, begun.getTime() - beforeMs / 100));
		const at = (when: Date): Deps => ({ ...deps, now: () => when });
		let booking: Booking | undefined = known.find(
			(one) => one.build === plan.build && one.client === plan.client && one.from === from.toISOString()
		);
		booking ??= await requestBooking(
			at(clock(ASKED_BEFORE_MS)),
			cast(plan.askedBy === 'client' ? plan.client : plan.askedBy),
			NewBooking.parse({
				client: plan.client,
				cell: plan.cell,
				build: plan.build,
				fuelBatch: plan.batch,
				kind: plan.kind,
				purpose: plan.purpose,
				from: from.toISOString(),
				to: to.toISOString()
			}),
			{ asHistory: true }
		);
		if (plan.confirmed && booking.state === 'requested' && booking.version === 1)
			await confirmBooking(
				at(clock(ANSWERED_BEFORE_MS)),
				cast('manager'),
				booking.id,
				{},
				{ asHistory: true }
			);
		numbers.set(plan.key, booking.number);
	}
	return numbers;
}
