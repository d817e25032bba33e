import { z } from 'zod';
import { INDUCTIONS } from '$lib/domain/model';
import { fields } from '../api';

const Facts = {
	displacementL: fields.positive.max(5000, 'is in litres; this is too large'),
	cylinders: z.number().int('give a whole number').min(1, 'at least 1').max(64, 'at most 64'),
	strokesPerCycle: z.literal([2, 4], { error: 'is 2 or 4' }),
	ignition: z.enum(['spark', 'compression'])
};
const Optional = {
	inertiaKgM2: fields.notNegative,
	induction: z.enum(INDUCTIONS),
	boreMm: fields.positive,
	strokeMm: fields.positive,
	compressionRatio: z.number().gt(1, 'must be above 1').max(50, 'is too large'),
	maxSpeedRpm: fields.positive,
	expectedTorque: fields.lineOverSpeed
};

export const NewEngine = z
	.object({
		client: fields.ref.optional(),
		code: fields.code,
		name: fields.label(),
		...Facts,
		inertiaKgM2: Optional.inertiaKgM2.nullish(),
		induction: Optional.induction.nullish(),
		boreMm: Optional.boreMm.nullish(),
		strokeMm: Optional.strokeMm.nullish(),
		compressionRatio: Optional.compressionRatio.nullish(),
		maxSpeedRpm: Optional.maxSpeedRpm.nullish(),
		expectedTorque: Optional.expectedTorque.nullish()
	})
	.refine((engine) => engine.ignition === 'spark' || engine.induction, {
		path: ['induction'],
		error: 'a compression-ignition engine needs it: natural, mechanical, turbo or turbo_cooled'
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
	version: z.number()
});
export type EngineFields = z.input<typeof EngineView>;
