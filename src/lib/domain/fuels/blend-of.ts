import { blendFuels, type Blend } from '../formulas/blend';
import { compositionOf } from '../formulas/fuel';

/** A component as a fuel lists it; its own properties where someone gave them. */
export interface FuelComponent {
	name: string;
	volumeFraction: number;
	densityKgM3?: number | null | undefined;
	lhvMjKg?: number | null | undefined;
	hydrogenCarbonRatio?: number | null | undefined;
	oxygenCarbonRatio?: number | null | undefined;
}

/** A list may be rounded to a tenth of a percent. */
const SUM_WITHIN = 0.001;

/** How far volume fractions are from a whole, as a sentence; null where they are one. */
export function sumProblem(components: readonly { volumeFraction: number }[]): string | null {
	const sum = components.reduce((total, part) => total + part.volumeFraction, 0);
	if (Math.abs(sum - 1) < SUM_WITHIN) return null;
	return `The parts add up to ${(sum * 100).toFixed(1)} %; they must add up to 100 %.`;
}

/**
 * What a fuel should be by its components. Oxygen that is not given is none.
 * @returns null where a component lacks density, heating value or H/C, or the list is not whole
 */
export function blendOf(components: readonly FuelComponent[] | null): Blend | null {
	if (!components?.length) return null;
	const known = components.flatMap((part) =>
		part.densityKgM3 && part.lhvMjKg && part.hydrogenCarbonRatio != null
			? [
					{
						name: part.name,
						volumeFraction: part.volumeFraction,
						densityKgM3: part.densityKgM3,
						lhvMjKg: part.lhvMjKg,
						composition: compositionOf(part.hydrogenCarbonRatio, part.oxygenCarbonRatio ?? 0)
					}
				]
			: []
	);
	if (known.length < components.length) return null;
	const blend = blendFuels(known);
	return 'problem' in blend ? null : blend;
}
