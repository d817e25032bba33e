import { z } from 'zod';
import { INDUCTIONS } from '$lib/domain/model';
import { fields, PageQuery, sortField } from '../api';
import { BehindView } from '../recompute';

const Facts = {
	displacementL: fields.positive.max(5000, 'is in litres; this is too large'),
	cylinders: z.number().int('give a whole number').min(1, 'at least 1').max(64, 'at most 64'),
	strokesPerCycle: z.literal([2, 4], { error: 'is 2 or 4' }),
	ignition: z.enum(['spark', 'compression'])
};
const Optional = {
	inertiaKgM2: fields.notNegative.nullish(),
	induction: z.enum(INDUCTIONS).nullish(),
	boreMm: fields.positive.nullish(),
	strokeMm: fields.positive.nullish(),
	compressionRatio: z.number().gt(1, 'must be above 1').max(50, 'is too large').nullish(),
	maxSpeedRpm: fields.positive.nullish(),
	expectedTorque: fields.lineOverSpeed.nullish()
};

export const NEEDS_INDUCTION =
	'a compression-ignition engine needs it: natural, mechanical, turbo or turbo_cooled';

export const NewEngine = z
	.object({
		client: fields.ref.optional(),
		code: fields.code,
		name: fields.label(),
		...Facts,
		...Optional
	})
	.refine((engine) => engine.ignition === 'spark' || engine.induction, {
		path: ['induction'],
		error: NEEDS_INDUCTION
	});

/** Its client and its code stay: they stand on what was written about it. Null takes a value away. */
export const EngineChange = z
	.object({ name: fields.label(), ...Facts, ...Optional, reason: fields.reason })
	.partial()
	.refine((change) => Object.keys(change).some((field) => field !== 'reason'), 'name what to change');

export const EngineQuery = z.object({
	client: fields.ref.optional(),
	/** Part of a code or a name. */
	q: z.string().trim().max(200).optional(),
	sort: sortField(['code', 'name', 'displacement', 'builds', 'runs']),
	/** Without it all are listed at once. */
	limit: PageQuery.shape.limit.unwrap().optional(),
	cursor: PageQuery.shape.cursor
});

export const EngineView = z.object({
	id: z.string(),
	client: z.string(),
	code: z.string(),
	name: z.string(),
	displacementL: z.number(),
	cylinders: z.number(),
	strokesPerCycle: z.number(),
	ignition: z.enum(['spark', 'compression']),
	inertiaKgM2: z.number().nullable(),
	induction: z.enum(INDUCTIONS).nullable(),
	boreMm: z.number().nullable(),
	strokeMm: z.number().nullable(),
	compressionRatio: z.number().nullable(),
	maxSpeedRpm: z.number().nullable(),
	expectedTorque: z.array(z.tuple([z.number(), z.number()])).nullable(),
	builds: z.number(),
	runs: z.number(),
	version: z.number()
});
export type EngineFields = z.input<typeof EngineView>;

/** With the runs whose figures were made with what stood there before. */
export const ChangedEngine = EngineView.extend({ behind: BehindView });
