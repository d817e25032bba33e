import { valueWithUnit } from '../display/figure';
import { labelOf } from '../display/labels';
import { FUEL_PROPERTIES, type FuelFacts, type FuelPropertyName } from '../model';

/** What a property of a fuel may be; a side left out is open. */
interface Allowed {
	min?: number | undefined;
	max?: number | undefined;
}
export type Specification = Partial<Record<FuelPropertyName, Allowed>>;

/** Where a batch stands against one line of its fuel's specification. */
interface Outcome {
	property: FuelPropertyName;
	/** `near`: inside, but by less than its own expanded uncertainty, so that it may be outside; or the other way round. */
	verdict: 'inside' | 'near' | 'outside' | 'unknown';
	sentence: string;
}

const COVERAGE = 2;

/** `42.1 to 43.0 MJ/kg`, `at least 0.7`. */
export function allowedText(property: FuelPropertyName, { min, max }: Allowed): string {
	if (min !== undefined && max !== undefined)
		return `${valueWithUnit(property, min)} to ${valueWithUnit(property, max)}`;
	return min === undefined
		? `at most ${valueWithUnit(property, max)}`
		: `at least ${valueWithUnit(property, min)}`;
}

/** Each line of a specification against what was measured of a batch, in the usual order of the properties. */
export function againstSpecification(facts: FuelFacts, specification: Specification): Outcome[] {
	return FUEL_PROPERTIES.flatMap((property): Outcome[] => {
		const allowed = specification[property];
		if (!allowed || (allowed.min === undefined && allowed.max === undefined)) return [];
		const measured = facts[property];
		const { label } = labelOf(property);
		const rule = allowedText(property, allowed);
		if (!measured)
			return [
				{
					property,
					verdict: 'unknown',
					sentence: `${label} is not recorded; the fuel asks for ${rule}.`
				}
			];
		const { min = -Infinity, max = Infinity } = allowed;
		const { value } = measured;
		const distance = Math.min(Math.abs(value - min), Math.abs(value - max));
		const outside = value < min || value > max;
		const near = distance > 0 && distance < COVERAGE * (measured.u ?? 0);
		const is = `${label} is ${valueWithUnit(property, value)}; the fuel asks for ${rule}`;
		const sentence = near ? `${is}. By its uncertainty it may be on either side.` : `${is}.`;
		return [{ property, verdict: near ? 'near' : outside ? 'outside' : 'inside', sentence }];
	});
}
