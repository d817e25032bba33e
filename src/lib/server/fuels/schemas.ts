import { z } from 'zod';
import { sumProblem } from '$lib/domain/fuels/blend-of';
import { fields, sortField } from '../api';
import { BehindView } from '../recompute';

/** Ranges are wide physical bounds: they catch a wrong unit (42700 for 42.7), not an unusual fuel. */
const RANGES = {
	lhvMjKg: z.number().min(1).max(142),
	densityKgM3: z.number().min(0.05).max(2000),
	afrStoich: z.number().min(0.5).max(40),
	hydrogenCarbonRatio: z.number().min(0).max(10),
	oxygenCarbonRatio: z.number().min(0).max(4),
	oxygenMassPct: z.number().min(0).max(90),
	ron: z.number().min(0).max(150),
	expansionPerK: z.number().min(0).max(0.01)
};

const Component = z.object({
	name: fields.label(80),
	volumeFraction: z.number().min(0, 'must not be negative').max(1, 'is a fraction, at most 1'),
	/** Its own properties, where known for all of them, make the fuel's. */
	densityKgM3: RANGES.densityKgM3.nullish(),
	lhvMjKg: RANGES.lhvMjKg.nullish(),
	hydrogenCarbonRatio: RANGES.hydrogenCarbonRatio.nullish(),
	oxygenCarbonRatio: RANGES.oxygenCarbonRatio.nullish()
});

const Components = z
	.array(Component)
	.max(50)
	.refine((parts) => sumProblem(parts) === null, 'the volume fractions must add up to 1')
	.nullish();

const allowed = (range: z.ZodNumber) =>
	z
		.object({ min: range, max: range })
		.partial()
		.refine(({ min, max }) => min === undefined || max === undefined || min <= max, 'min is above max')
		.optional();
const SpecificationView = z.object({
	lhvMjKg: allowed(RANGES.lhvMjKg),
	densityKgM3: allowed(RANGES.densityKgM3),
	afrStoich: allowed(RANGES.afrStoich),
	hydrogenCarbonRatio: allowed(RANGES.hydrogenCarbonRatio),
	oxygenCarbonRatio: allowed(RANGES.oxygenCarbonRatio),
	oxygenMassPct: allowed(RANGES.oxygenMassPct),
	ron: allowed(RANGES.ron),
	expansionPerK: allowed(RANGES.expansionPerK)
});

export const NewFuel = z.object({
	code: fields.code,
	name: fields.label(),
	components: Components,
	/** What a batch of it may be; batches outside are told as such, never refused. */
	specification: SpecificationView.optional()
});

export const FuelChange = z
	.object({ name: fields.label(), components: Components, specification: SpecificationView })
	.partial()
	.refine(
		(change) => Object.keys(change).length > 0,
		'name what to change: name, components or specification'
	);

export const FuelView = z.object({
	id: z.string(),
	code: z.string(),
	name: z.string(),
	components: z.array(Component).nullable(),
	specification: SpecificationView,
	version: z.number()
});
export type Fuel = z.input<typeof FuelView>;

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

const properties = {
	lhvMjKg: property(RANGES.lhvMjKg),
	densityKgM3: property(RANGES.densityKgM3),
	afrStoich: property(RANGES.afrStoich),
	hydrogenCarbonRatio: property(RANGES.hydrogenCarbonRatio),
	oxygenCarbonRatio: property(RANGES.oxygenCarbonRatio),
	oxygenMassPct: property(RANGES.oxygenMassPct),
	ron: property(RANGES.ron),
	expansionPerK: property(RANGES.expansionPerK)
};

export const NewFuelBatch = z.object({
	client: fields.ref.optional(),
	fuel: fields.ref,
	code: fields.code,
	...properties
});

/** Null takes a value away; what is left out stays. */
export const FuelBatchChange = z
	.object({ ...properties, reason: fields.reason.optional() })
	.refine((change) => Object.keys(change).some((field) => field !== 'reason'), 'name what was measured');

const PropertyView = z.object({ value: z.number(), u: z.number().optional(), method: z.string().optional() });
export const FuelBatchView = z.object({
	id: z.string(),
	client: z.string().nullable(),
	fuel: z.string(),
	code: z.string(),
	properties: z.record(z.string(), PropertyView),
	runs: z.number(),
	version: z.number()
});
export type FuelBatch = z.input<typeof FuelBatchView>;

/** With the runs whose figures were made with what stood there before. */
export const ChangedFuelBatch = FuelBatchView.extend({ behind: BehindView });

export const FuelBatchQuery = z.object({
	fuel: fields.ref.optional(),
	/** A client's code, or `lab` for what is kept for all. */
	client: fields.ref.optional(),
	/** Part of a code. */
	q: z.string().trim().max(200).optional(),
	sort: sortField(['code', 'fuel', 'added', 'runs'])
});

/** What a batch was recorded as, newest first, and how many runs have figures made with it. */
export const FuelBatchVersions = z.object({
	items: z.array(
		z.object({
			version: z.number(),
			properties: z.record(z.string(), PropertyView),
			by: z.string().nullable(),
			at: fields.instantOut,
			runs: z.number()
		})
	)
});

/** Where a batch stands: against its fuel, against itself, and against rules that speak of the fuel. */
export const FuelBatchCheck = z.object({
	specification: z.array(
		z.object({
			property: z.string(),
			verdict: z.enum(['inside', 'near', 'outside', 'unknown']),
			sentence: z.string()
		})
	),
	disagreements: z.array(z.string()),
	rules: z.array(
		z.object({
			limitSet: z.string(),
			rule: z.string(),
			severity: z.enum(['note', 'review', 'breach']),
			message: z.string()
		})
	)
});
