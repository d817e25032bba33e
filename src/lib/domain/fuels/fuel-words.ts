import { COVERAGE } from '../display/figure';
import { formatWithUncertainty, plainNumber } from '../display/format';
import { labelOf } from '../display/labels';
import { FUEL_PROPERTIES, type FuelPropertyName, type Property } from '../model';

/** A measured value as text, with its expanded uncertainty, unit and method. */
export function propertyText(name: FuelPropertyName, property: Property | null | undefined): string {
	if (!property) return 'not known';
	const { unit } = labelOf(name);
	const { value, u, method } = property;
	const shown = u
		? formatWithUncertainty(value, u * COVERAGE)
		: { value: plainNumber(value), plusMinus: null };
	const whole = `${shown.value}${shown.plusMinus ? ` ± ${shown.plusMinus}` : ''}${unit && ` ${unit}`}`;
	return method ? `${whole} (${method})` : whole;
}

/** What was changed of a batch's measured values. */
export function batchChangesInWords(before: Record<string, unknown>, after: Record<string, unknown>): string {
	return FUEL_PROPERTIES.filter((name) => name in after)
		.map((name) => {
			const [was, is] = [before[name], after[name]] as (Property | undefined)[];
			return `${labelOf(name).label} ${propertyText(name, was)} → ${propertyText(name, is)}`;
		})
		.join('; ');
}
