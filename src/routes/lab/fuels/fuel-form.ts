import { z } from 'zod';
import { componentsOf, componentsText } from '$lib/domain/fuels/components-text';
import { PROPERTY_HELP } from '$lib/domain/fuels/property-help';
import { valueWithUnit } from '$lib/domain/display/figure';
import { FUEL_PROPERTIES, type FuelFacts, type FuelPropertyName, type Property } from '$lib/domain/model';
import type { Fuel } from '$lib/server/fuels';

const CODE = z
	.string()
	.trim()
	.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.');
const reason = z.string().trim().max(1000, 'At most 1000 characters.').default('');
const version = z.number().int();

function inRange(name: FuelPropertyName) {
	const { low, high } = PROPERTY_HELP[name];
	const sentence = `Between ${valueWithUnit(name, low)} and ${valueWithUnit(name, high)}. Is the unit right?`;
	return z
		.number({ error: 'Give a number.' })
		.min(low, sentence)
		.max(high, sentence)
		.nullable()
		.default(null);
}
type InRange = ReturnType<typeof inRange>;

type SpecificationShape = Record<`${FuelPropertyName}Min` | `${FuelPropertyName}Max`, InRange>;
const specification = Object.fromEntries(
	FUEL_PROPERTIES.flatMap((name) => [
		[`${name}Min`, inRange(name)],
		[`${name}Max`, inRange(name)]
	])
) as SpecificationShape;

const name = z.string().trim().min(1, 'Give it a name.').max(200, 'At most 200 characters.');
const components = z
	.string()
	.max(20_000, 'At most 20 000 characters.')
	.default('')
	.superRefine((text, check) => {
		for (const message of componentsOf(text).problems) check.addIssue({ code: 'custom', message });
	});

type Limits = z.output<z.ZodObject<SpecificationShape>>;
function ordered(typed: Limits, check: z.RefinementCtx): void {
	for (const property of FUEL_PROPERTIES) {
		const [min, max] = [typed[`${property}Min`], typed[`${property}Max`]];
		if (min !== null && max !== null && min > max)
			check.addIssue({ code: 'custom', path: [`${property}Max`], message: 'Must not be below the least.' });
	}
}

export const NewFuelForm = z.object({ code: CODE, name, components, ...specification }).superRefine(ordered);
export const FuelChangeForm = z.object({ name, components, version, ...specification }).superRefine(ordered);

/** What was typed, as the use cases take it. */
export function fuelOf(typed: Limits & { name: string; components: string }) {
	const list = componentsOf(typed.components).components;
	const specified = FUEL_PROPERTIES.flatMap((property) => {
		const [min, max] = [typed[`${property}Min`] ?? undefined, typed[`${property}Max`] ?? undefined];
		return min === undefined && max === undefined ? [] : [[property, { min, max }]];
	});
	return {
		name: typed.name,
		components: list.length > 0 ? list : null,
		specification: Object.fromEntries(specified) as Fuel['specification']
	};
}

export const typedFuel = (fuel: Fuel) => ({
	name: fuel.name,
	components: componentsText(fuel.components),
	version: fuel.version,
	...(Object.fromEntries(
		FUEL_PROPERTIES.flatMap((property) => [
			[`${property}Min`, fuel.specification[property]?.min ?? null],
			[`${property}Max`, fuel.specification[property]?.max ?? null]
		])
	) as Limits)
});

const uncertainty = z
	.number({ error: 'Give a number.' })
	.min(0, 'Must not be negative.')
	.max(1e9, 'Too large.')
	.nullable()
	.default(null);
const method = z.string().trim().max(80, 'At most 80 characters.').default('');
type MeasuredShape = Record<`${FuelPropertyName}Value`, InRange> &
	Record<`${FuelPropertyName}U`, typeof uncertainty> &
	Record<`${FuelPropertyName}Method`, typeof method>;
const measured = Object.fromEntries(
	FUEL_PROPERTIES.flatMap((property) => [
		[`${property}Value`, inRange(property)],
		[`${property}U`, uncertainty],
		[`${property}Method`, method]
	])
) as MeasuredShape;
type Measured = z.output<z.ZodObject<MeasuredShape>>;

function whole(typed: Measured, check: z.RefinementCtx): void {
	for (const property of FUEL_PROPERTIES)
		if (typed[`${property}Value`] === null && (typed[`${property}U`] !== null || typed[`${property}Method`]))
			check.addIssue({
				code: 'custom',
				path: [`${property}Value`],
				message: 'Give the value too, or clear its uncertainty and method.'
			});
}

export const NewBatchForm = z
	.object({
		fuel: z.string().min(1, 'Choose the fuel.'),
		code: CODE,
		client: z.string().default(''),
		...measured
	})
	.superRefine(whole);
export const BatchChangeForm = z.object({ ...measured, reason, version }).superRefine(whole);

/** What was typed, as the use cases take it; what is empty is taken away. */
export const propertiesOf = (typed: Measured): Record<FuelPropertyName, Property | null> =>
	Object.fromEntries(
		FUEL_PROPERTIES.map((property) => {
			const value = typed[`${property}Value`];
			const [u, how] = [typed[`${property}U`], typed[`${property}Method`]];
			return [
				property,
				value === null ? null : { value, ...(u === null ? {} : { u }), ...(how ? { method: how } : {}) }
			];
		})
	) as Record<FuelPropertyName, Property | null>;

export const typedProperties = (facts: FuelFacts) =>
	Object.fromEntries(
		FUEL_PROPERTIES.flatMap((property) => [
			[`${property}Value`, facts[property]?.value ?? null],
			[`${property}U`, facts[property]?.u ?? null],
			[`${property}Method`, facts[property]?.method ?? '']
		])
	) as Measured;
