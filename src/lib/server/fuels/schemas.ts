import { z } from 'zod';
import { fields } from '../api';

const Component = z.object({
	name: fields.label(80),
	volumeFraction: z.number().min(0, 'must not be negative').max(1, 'is a fraction, at most 1')
});

export const NewFuel = z.object({
	code: fields.code,
	name: fields.label(),
	components: z
		.array(Component)
		.max(50)
		.refine(
			(parts) => Math.abs(parts.reduce((sum, part) => sum + part.volumeFraction, 0) - 1) < 0.001,
			'the volume fractions must add up to 1'
		)
		.nullish()
});
export const FuelView = z.object({
	id: z.string(),
	code: z.string(),
	name: z.string(),
	components: z.array(Component).nullable()
});

/** A measured value, bare or with its standard uncertainty and method. */
const property = (range: z.ZodNumber) =>
	z
		.union(
			[
				range,
				z.object({ value: range, u: fields.notNegative.optional(), method: fields.label(80).optional() })
			],
			{
				error: 'give a number, or {value, u, method}, inside the possible range'
			}
		)
		.transform((given) => (typeof given === 'number' ? { value: given } : given))
		.nullish();

/** Ranges are wide physical bounds: they catch a wrong unit (42700 for 42.7), not an unusual fuel. */
const properties = {
	lhvMjKg: property(z.number().min(1).max(142)),
	densityKgM3: property(z.number().min(0.05).max(2000)),
	afrStoich: property(z.number().min(0.5).max(40)),
	hydrogenCarbonRatio: property(z.number().min(0).max(10)),
	oxygenCarbonRatio: property(z.number().min(0).max(4)),
	oxygenMassPct: property(z.number().min(0).max(90)),
	ron: property(z.number().min(0).max(150)),
	expansionPerK: property(z.number().min(0).max(0.01))
};

export const NewFuelBatch = z.object({
	client: fields.ref.optional(),
	fuel: fields.ref,
	code: fields.code,
	...properties
});

const PropertyView = z.object({ value: z.number(), u: z.number().optional(), method: z.string().optional() });
export const FuelBatchView = z.object({
	id: z.string(),
	client: z.string().nullable(),
	fuel: z.string(),
	code: z.string(),
	properties: z.record(z.string(), PropertyView),
	version: z.number()
});
