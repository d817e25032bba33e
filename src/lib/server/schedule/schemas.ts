import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { fields } from '../api';

/** Days of the lab, or instants. Absent: a week from today. */
export const ScheduleQuery = z.object({
	from: z.string().max(40).optional(),
	to: z.string().max(40).optional()
});
export type ScheduleQueryInput = z.output<typeof ScheduleQuery>;

const Span = { from: z.string(), to: z.string() };

const Entry = z.discriminatedUnion('kind', [
	z.object({
		kind: z.literal('booking'),
		id: z.string(),
		number: z.string(),
		state: z.enum(['requested', 'confirmed', 'done']),
		client: z.string(),
		build: z.string(),
		buildId: z.string(),
		buildTitle: z.string(),
		buildState: z.string(),
		test: z.enum(RUN_KINDS).nullable(),
		/** Number of the slot it asks to replace. */
		replaces: z.string().nullable(),
		...Span,
		rigUpMinutes: z.number(),
		rigDownMinutes: z.number(),
		/** What this person may do with it now. */
		may: z.array(z.enum(['confirm', 'decline', 'cancel', 'move'])),
		version: z.number()
	}),
	/** Someone else's time, rigging included; neighbouring times are one. */
	z.object({ kind: z.literal('taken'), ...Span }),
	z.object({ kind: z.literal('closed'), id: z.string().optional(), title: z.string().optional(), ...Span })
]);
export type ScheduleEntry = z.input<typeof Entry>;

export const ScheduleView = z.object({
	...Span,
	timeZone: z.string(),
	cells: z.array(
		z.object({
			code: z.string(),
			name: z.string(),
			colour: z.number(),
			rigUpMinutes: z.number(),
			rigDownMinutes: z.number(),
			/** When the cell is open in this stretch; the whole of it where it has no opening hours. */
			open: z.array(z.object(Span)),
			entries: z.array(Entry)
		})
	)
});
export type Schedule = z.input<typeof ScheduleView>;

const WEEKS_AHEAD = 13;
const LONGEST_SEARCH_DAYS = WEEKS_AHEAD * 7 + 1;

export const FirstFitWish = z
	.object({
		client: fields.ref.optional(),
		build: fields.ref,
		kind: z.enum(RUN_KINDS, { error: `is one of ${RUN_KINDS.join(', ')}` }).nullish(),
		fuelBatch: fields.ref.nullish(),
		durationMinutes: z
			.number({ error: 'give whole minutes' })
			.int('give whole minutes')
			.min(1, 'at least 1')
			.max(31 * 24 * 60, 'at most 31 days'),
		notBefore: fields.instant,
		notAfter: fields.instant
	})
	.refine((wish) => wish.notAfter > wish.notBefore, {
		path: ['notAfter'],
		error: 'must be later than notBefore'
	})
	.refine((wish) => +wish.notAfter - +wish.notBefore <= LONGEST_SEARCH_DAYS * 86_400_000, {
		path: ['notAfter'],
		error: `must be within ${WEEKS_AHEAD} weeks of notBefore`
	});
export type FirstFitWishInput = z.output<typeof FirstFitWish>;

export const FirstFitView = z.object({
	/** The earliest in each cell that fits, earliest first. */
	slots: z.array(
		z.object({
			cell: z.string(),
			cellName: z.string(),
			...Span,
			rigUpMinutes: z.number(),
			rigDownMinutes: z.number()
		})
	),
	refused: z.array(z.object({ cell: z.string(), reason: z.string() })),
	note: z.string()
});
export type FirstFit = z.input<typeof FirstFitView>;
