import { z } from 'zod';
import { fields } from '../api';
import { RunFilter } from '../runs';

const GROUPS = ['build', 'engine', 'fuel', 'batch', 'cell', 'month'] as const;

export const TrendQuery = RunFilter.extend({
	metric: z.string().regex(/^[a-z][a-z0-9_]{1,60}$/, 'name a metric, e.g. bte_max'),
	groupBy: z.enum(GROUPS, { error: `is one of ${GROUPS.join(', ')}` }).default('build'),
	/** Only accepted runs, or all that are not void. */
	state: z
		.enum(['accepted', 'not_voided'], { error: 'is one of accepted, not_voided' })
		.default('not_voided'),
	/** Repeats are runs of one build, cell, batch and kind on one day: each counts, or each set once by its mean. */
	repeats: z.enum(['each', 'once'], { error: 'is one of each, once' }).default('each'),
	/** Key of the group that the others are compared with; the first with two runs unless named. */
	against: z.string().max(200).optional()
});
export type TrendQueryInput = z.output<typeof TrendQuery>;

const Interval = z.tuple([z.number(), z.number()]);

export const TrendView = z.object({
	metric: z.string(),
	unit: fields.unitOut.nullable(),
	/** The group that differences are to; null where none can be. */
	against: z.string().nullable(),
	groups: z.array(
		z.object({
			key: z.string(),
			title: z.string().nullable(),
			/** What is counted: runs, or sets of repeats. */
			n: z.number(),
			runs: z.number(),
			/** Sets of repeats. */
			sets: z.number(),
			mean: z.number(),
			/** Standard deviation (n − 1); null for a single run. */
			sd: z.number().nullable(),
			ci95: Interval.nullable(),
			/** Mean less that of the compared group, by Welch’s t; null for that group itself and where n is below two. */
			difference: z.object({ value: z.number(), df: z.number(), ci95: Interval }).nullable()
		})
	),
	points: z.array(
		z.object({
			run: z.string(),
			group: z.string(),
			at: fields.instantOut,
			value: z.number(),
			u: z.number().nullable()
		})
	),
	pointsTotal: z.number(),
	/** Why a filter can match nothing, as sentences. */
	notes: z.array(z.string())
});
export type Trend = z.input<typeof TrendView>;
