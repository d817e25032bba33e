import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { BookingView } from '../bookings';
import { RunListItem } from '../runs';
import { ScheduleView } from '../schedule';

const Lane = ScheduleView.shape.cells.element.shape;

const NeedView = z.object({
	code: z.string(),
	message: z.string(),
	/** Number of the run that lacks it. */
	run: z.string().nullable()
});

const RunOnDay = z.object({
	number: z.string(),
	client: z.string(),
	build: z.string(),
	buildId: z.string(),
	buildTitle: z.string(),
	kind: z.enum(RUN_KINDS),
	state: z.enum(['open', 'closed', 'accepted', 'voided']),
	loggedBy: z.string(),
	from: z.string(),
	to: z.string().nullable()
});
export type RunOnDay = z.input<typeof RunOnDay>;

const BookingOnDay = BookingView.pick({
	id: true,
	number: true,
	client: true,
	clientName: true,
	build: true,
	buildId: true,
	buildTitle: true,
	fuelBatch: true,
	kind: true,
	rigUpMinutes: true,
	rigDownMinutes: true
});

const AffectedView = z.object({
	/** `taken` says all that this person may know. */
	kind: z.enum(['booking', 'taken', 'closed']),
	number: z.string().nullable(),
	client: z.string().nullable(),
	/** Rigging included. */
	occupiedFrom: z.string(),
	/** 0: there is room enough, if the work takes as long as was booked. */
	waitsMinutes: z.number()
});

const WorkView = z.object({
	/** Null for a run without a slot. */
	booking: BookingOnDay.nullable(),
	runs: z.array(RunOnDay),
	from: z.string(),
	to: z.string().nullable(),
	elapsedMinutes: z.number(),
	remainingMinutes: z.number().nullable(),
	lateMinutes: z.number(),
	overrunMinutes: z.number(),
	/** Who comes after it today, where it is late or overruns. */
	affects: AffectedView.nullable(),
	needs: z.array(NeedView)
});
export type Work = z.input<typeof WorkView>;

const Waiting = z.object({ count: z.number(), items: z.array(RunListItem) });

export const TodayView = z.object({
	at: z.string(),
	/** The lab's day. */
	from: z.string(),
	to: z.string(),
	timeZone: z.string(),
	cells: z.array(
		z.object({
			code: Lane.code,
			name: Lane.name,
			open: Lane.open,
			/** What of the day is booked, asked for, taken or closed. */
			entries: Lane.entries,
			runs: z.array(RunOnDay),
			on: z.array(WorkView),
			/** Taken by someone else, or closed, at this moment. */
			held: z
				.object({ kind: z.enum(['taken', 'closed']), title: z.string().nullable(), to: z.string() })
				.nullable(),
			/** The next confirmed slot, or taken time, within a week. */
			next: z
				.object({
					kind: z.enum(['booking', 'taken']),
					from: z.string(),
					to: z.string(),
					work: WorkView.nullable()
				})
				.nullable(),
			/** Of earlier today, what still lacks something. */
			earlier: z.array(WorkView)
		})
	),
	requests: z.object({ count: z.number(), items: z.array(BookingView) }),
	/** Builds that a slot of the coming week needs and that are not ready, soonest first. */
	buildsNeeded: z.array(
		z.object({
			build: z.string(),
			buildId: z.string(),
			buildTitle: z.string(),
			client: z.string(),
			booking: z.string(),
			cell: z.string(),
			from: z.string()
		})
	),
	flagged: Waiting,
	toReview: Waiting,
	/** Records that nobody closed, a day old or more. */
	leftOpen: z.array(RunOnDay.extend({ cell: z.string() })),
	/** Traces of any day that wait for someone to say what their columns are. */
	toMap: z.array(RunOnDay.extend({ cell: z.string() }))
});
export type Today = z.input<typeof TodayView>;
