import { z } from 'zod';
import { fields, sortField } from '../api';

const Part = z.object({
	name: fields.label(80),
	value: z.string().trim().max(500, 'at most 500 characters')
});
const State = z.enum(['in_preparation', 'ready', 'retired']);

export const NewBuild = z.object({
	client: fields.ref.optional(),
	engine: fields.ref,
	number: fields.code,
	title: fields.label(),
	parent: fields.ref.nullish(),
	parts: z.array(Part).max(200, 'at most 200 parts').default([])
});

export const BuildChange = z
	.object({ title: fields.label(), parts: z.array(Part).max(200, 'at most 200 parts'), state: State })
	.partial()
	.refine((change) => Object.keys(change).length > 0, 'name what to change: title, parts or state');

export const BuildView = z.object({
	id: z.string(),
	client: z.string(),
	engine: z.string(),
	engineId: z.string(),
	engineName: z.string(),
	number: z.string(),
	title: z.string(),
	parent: z.string().nullable(),
	parentId: z.string().nullable(),
	parts: z.array(Part),
	state: State,
	following: z.boolean(),
	runs: z.number(),
	version: z.number()
});
export type Build = z.input<typeof BuildView>;

export const BuildQuery = z.object({
	client: fields.ref.optional(),
	engine: fields.ref.optional(),
	state: State.optional(),
	/** Part of a number or a title. */
	q: z.string().trim().max(200).optional(),
	sort: sortField(['added', 'number', 'title', 'engine', 'runs'])
});

/** A build of a lineage, with what it changed against the one before. */
const Relative = z.object({
	id: z.string(),
	number: z.string(),
	title: z.string(),
	state: State,
	/** None for the first of the line, which has nothing to be compared with. */
	changes: z.array(
		z.object({
			name: z.string(),
			value: z.string().nullable(),
			before: z.string().nullable(),
			change: z.enum(['changed', 'added', 'removed'])
		})
	)
});

export const HoursView = z.object({
	hours: z.number(),
	/** Turning faster than this counts as running. */
	runningAboveRpm: z.number(),
	/** Running time in traces. */
	fromTraces: z.object({ hours: z.number(), runs: z.number() }),
	/** Runs without such a trace: from the start to the end of their record. */
	fromRecords: z.object({ hours: z.number(), runs: z.number() }),
	/** Runs of which neither is known, such as those still open. */
	unknownRuns: z.number()
});
export type RunningHours = z.input<typeof HoursView>;

const Best = z.object({
	code: z.string(),
	unit: fields.unitOut,
	/** Set for corrected figures, which compare only under one standard. */
	correction: z.string().nullable(),
	value: z.number(),
	u: z.number().nullable(),
	run: z.string(),
	runId: z.string(),
	/** Runs that have the figure. */
	n: z.number(),
	mean: z.number(),
	/** Scatter from run to run; null for a single one. */
	sd: z.number().nullable()
});

export const BuildRecord = z.object({
	hours: HoursView,
	engineHours: HoursView,
	best: z.array(Best),
	/** From the first build to this one. */
	lineage: z.array(Relative),
	/** Builds made from this one. */
	children: z.array(z.object({ id: z.string(), number: z.string(), title: z.string(), state: State }))
});
