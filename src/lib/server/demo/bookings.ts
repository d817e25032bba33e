import {
	cancelBooking,
	closeCell,
	confirmBooking,
	declineBooking,
	listBookings,
	moveBooking,
	NewBooking,
	requestBooking,
	type Booking
} from '../bookings';
import type { Deps } from '../deps';
import { readSchedule } from '../schedule';
import { momentOf, type Moment } from './calendar';
import type { DemoBooking } from './lab/booking';
import { DEMO_BOOKINGS } from './lab/bookings';
import { DEMO_CLOSURES } from './lab/other-bookings';
import type { Cast } from './people';

const DAY_MS = 24 * 3_600_000;
/** A customer's request, the manager's answer and any second thoughts come so long before the slot. */
const ASKED_BEFORE_MS = 8 * DAY_MS;
const ANSWERED_BEFORE_MS = 7 * DAY_MS;
const CHANGED_BEFORE_MS = 3 * DAY_MS;
const HISTORY = { asHistory: true };

interface Span {
	from: Date;
	to: Date;
}

/** The bookings of a lab that is begun then, with their times, in the order in which they were asked for. */
export function bookingsFrom(begun: Date, zone: string): { plan: DemoBooking; span: Span }[] {
	return DEMO_BOOKINGS.map((plan) => ({ plan, span: spanOf(begun, zone, plan) })).sort(
		(a, b) => a.span.from.getTime() - b.span.from.getTime()
	);
}

const spanOf = (begun: Date, zone: string, { from, to }: { from: Moment; to: Moment }): Span => ({
	from: momentOf(begun, zone, from),
	to: momentOf(begun, zone, to)
});

/** Adds the bookings that are missing, as history: nobody is mailed about them. @returns their numbers by key */
export async function addBookings(deps: Deps, cast: Cast, begun: Date): Promise<Map<string, string>> {
	const zone = deps.config.labTimeZone;
	const known = (await listBookings(deps, cast('manager'), { limit: 500 })).items;
	const numbers = new Map<string, string>();
	for (const { plan, span } of bookingsFrom(begun, zone)) {
		const asked = plan.fate.is === 'moved' ? spanOf(begun, zone, plan.fate.first) : span;
		const same = known.find(
			({ client, build, from }) =>
				client === plan.client &&
				build === plan.build &&
				[asked.from.toISOString(), span.from.toISOString()].includes(from)
		);
		const booking = same ?? (await ask(deps, cast, { plan, begun, asked }));
		await decide(deps, cast, { plan, begun, asked, span }, booking);
		numbers.set(plan.key, booking.number);
	}
	return numbers;
}

/** Nothing was asked or answered after the day on which this lab began. */
const clockOf = (begun: Date, slot: Date, beforeMs: number) =>
	new Date(Math.min(slot.getTime() - beforeMs, begun.getTime() - beforeMs / 100));

interface Asked {
	plan: DemoBooking;
	begun: Date;
	asked: Span;
}

async function ask(deps: Deps, cast: Cast, { plan, begun, asked }: Asked): Promise<Booking> {
	const now = clockOf(begun, asked.from, ASKED_BEFORE_MS);
	return requestBooking(
		{ ...deps, now: () => now },
		cast(plan.askedBy === 'client' ? plan.client : plan.askedBy),
		NewBooking.parse({
			client: plan.client,
			cell: plan.cell,
			build: plan.build,
			fuelBatch: plan.batch,
			kind: plan.kind,
			purpose: plan.purpose,
			from: asked.from.toISOString(),
			to: asked.to.toISOString()
		}),
		HISTORY
	);
}

/** Brings a booking from where it stands to its fate; each step is taken once, also by a seed that goes on. */
async function decide(
	deps: Deps,
	cast: Cast,
	{ plan, begun, asked, span }: Asked & { span: Span },
	booking: Booking
): Promise<void> {
	const { fate } = plan;
	const { id } = booking;
	const manager = cast('manager');
	const before = (beforeMs: number): Deps => {
		const now = clockOf(begun, asked.from, beforeMs);
		return { ...deps, now: () => now };
	};
	const isAsked = booking.state === 'requested' && booking.version === 1;
	const wants = fate.is === 'confirmed' || fate.is === 'moved' || (fate.is === 'cancelled' && fate.confirmed);
	if (isAsked && wants) await confirmBooking(before(ANSWERED_BEFORE_MS), manager, id, {}, HISTORY);
	const later = before(CHANGED_BEFORE_MS);
	if (fate.is === 'declined' && isAsked)
		await declineBooking(before(ANSWERED_BEFORE_MS), manager, id, fate, HISTORY);
	if (fate.is === 'cancelled' && booking.state !== 'cancelled')
		await cancelBooking(later, cast(fate.by === 'client' ? plan.client : fate.by), id, fate, HISTORY);
	if (fate.is === 'moved' && booking.from !== span.from.toISOString())
		await moveBooking(later, manager, id, span, null, HISTORY);
	if (fate.is === 'confirmed' && 'wished' in fate && booking.moveRequest === null)
		await moveBooking(
			later,
			cast(plan.client),
			id,
			spanOf(begun, deps.config.labTimeZone, fate.wished),
			null,
			HISTORY
		);
}

/** Shuts cells where they were shut, each known a week ahead. */
export async function addClosures(deps: Deps, cast: Cast, begun: Date): Promise<void> {
	const manager = cast('manager');
	for (const plan of DEMO_CLOSURES) {
		const span = spanOf(begun, deps.config.labTimeZone, plan);
		const { cells } = await readSchedule(deps, manager, {
			from: span.from.toISOString(),
			to: span.to.toISOString()
		});
		const entries = cells.find(({ code }) => code === plan.cell)?.entries ?? [];
		if (entries.some(({ kind, from }) => kind === 'closed' && from === span.from.toISOString())) continue;
		const now = clockOf(begun, span.from, ANSWERED_BEFORE_MS);
		await closeCell({ ...deps, now: () => now }, manager, { cell: plan.cell, title: plan.title, ...span });
	}
}
