import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { fields, PageQuery } from '../api';

const BOOKING_STATES = ['requested', 'confirmed', 'declined', 'cancelled', 'done'] as const;

export const NewBooking = z.object({
	client: fields.ref.optional(),
	cell: fields.ref,
	build: fields.ref,
	from: fields.instant,
	to: fields.instant,
	fuelBatch: fields.ref.nullish(),
	kind: z.enum(RUN_KINDS, { error: `is one of ${RUN_KINDS.join(', ')}` }).nullish(),
	purpose: z.string().trim().max(2000, 'at most 2000 characters').nullish()
});
export type NewBookingInput = z.output<typeof NewBooking>;

export const BookingMove = z
	.object({ from: fields.instant, to: fields.instant, cell: fields.ref })
	.partial()
	.refine((move) => Object.keys(move).length > 0, 'name what to change: from, to or cell');
export type BookingMoveInput = z.output<typeof BookingMove>;

export const Decision = z.object({ reason: fields.reason.nullish() });

/** Days are the lab's; `from` and `to` find what overlaps them. */
export const BookingQuery = PageQuery.extend({
	state: z.enum(BOOKING_STATES, { error: `is one of ${BOOKING_STATES.join(', ')}` }).optional(),
	cell: fields.ref.optional(),
	client: fields.ref.optional(),
	build: fields.ref.optional(),
	from: z.string().max(40).optional(),
	to: z.string().max(40).optional()
});
export type BookingQueryInput = z.output<typeof BookingQuery>;

const ClashView = z.object({
	/** `taken` says all that this person may know: another client, or the lab. */
	kind: z.enum(['booking', 'closed', 'taken']),
	number: z.string().optional(),
	cell: z.string(),
	/** Rigging included. */
	from: z.string(),
	to: z.string()
});

export const BookingView = z.object({
	id: z.string(),
	number: z.string(),
	state: z.enum(BOOKING_STATES),
	client: z.string(),
	clientName: z.string(),
	cell: z.string(),
	cellName: z.string(),
	build: z.string(),
	buildId: z.string(),
	buildTitle: z.string(),
	engine: z.string(),
	fuelBatch: z.string().nullable(),
	kind: z.enum(RUN_KINDS).nullable(),
	purpose: z.string().nullable(),
	/** The test itself; rigging comes before and after. */
	from: z.string(),
	to: z.string(),
	/** The cell's own until the booking is confirmed, then as copied at that moment. */
	rigUpMinutes: z.number(),
	rigDownMinutes: z.number(),
	/** Number of the slot that this one asks to replace, or has replaced. */
	replaces: z.string().nullable(),
	/** Number of an open request to move this slot. */
	moveRequest: z.string().nullable(),
	reason: z.string().nullable(),
	requestedBy: z.string(),
	requestedAt: z.string(),
	decidedBy: z.string().nullable(),
	decidedAt: z.string().nullable(),
	/** What to look at before the day; none of it refuses anything. */
	warnings: z.array(z.object({ code: z.string(), message: z.string() })),
	/** For a request: what stands there already. */
	clashesWith: z.array(ClashView),
	/** What this person may do with it now. */
	may: z.array(z.enum(['confirm', 'decline', 'cancel', 'move'])),
	version: z.number()
});
export type Booking = z.input<typeof BookingView>;

export const NewClosure = z.object({
	cell: fields.ref,
	from: fields.instant,
	to: fields.instant,
	title: fields.label(120)
});
export type NewClosureInput = z.output<typeof NewClosure>;

export const ClosureView = z.object({
	id: z.string(),
	cell: z.string(),
	from: z.string(),
	to: z.string(),
	title: z.string()
});
export type Closure = z.input<typeof ClosureView>;
