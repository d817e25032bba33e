import { compositionFromMass, elementMassFractions, stoichiometricAfr, type Composition } from './fuel';

export interface BlendComponent {
	name: string;
	volumeFraction: number;
	densityKgM3: number;
	lhvMjKg: number;
	composition: Composition;
}

export interface Blend {
	/** By component name, kg/kg. */
	massFractions: Record<string, number>;
	densityKgM3: number;
	lhvMjKg: number;
	hydrogenCarbonRatio: number;
	oxygenCarbonRatio: number;
	oxygenMassPct: number;
	afrStoich: number;
}

/**
 * A blend by volume fractions, mixed without excess volume (real ones differ by up to some tenths of a percent): mass fractions through the
 * densities, heating value and elements by mass.
 * @param components volume fractions that add up to 1 within 0.001, densities all at one temperature, kg/m³; LHV in MJ/kg
 * @returns the blend, or a sentence that says what is wrong with the list
 */
export function blendFuels(components: readonly BlendComponent[]): Blend | { problem: string } {
	const volume = components.reduce((sum, part) => sum + part.volumeFraction, 0);
	if (components.some((part) => !(part.volumeFraction >= 0)))
		return { problem: 'A volume fraction cannot be below zero.' };
	if (!(Math.abs(volume - 1) <= 0.001))
		return { problem: `The volume fractions add up to ${volume.toFixed(3)}; they must add up to 1.` };
	if (components.some((part) => !(part.densityKgM3 > 0)))
		return { problem: 'Each component needs its density.' };

	const densityKgM3 =
		components.reduce((sum, part) => sum + part.volumeFraction * part.densityKgM3, 0) / volume;
	const byMass = components.map((part) => ({
		part,
		share: (part.volumeFraction * part.densityKgM3) / (volume * densityKgM3)
	}));
	const elements = { carbon: 0, hydrogen: 0, oxygen: 0, nitrogen: 0, sulfur: 0 };
	const massFractions: Record<string, number> = {};
	let lhvMjKg = 0;
	for (const { part, share } of byMass) {
		massFractions[part.name] = (massFractions[part.name] ?? 0) + share;
		lhvMjKg += share * part.lhvMjKg;
		const own = elementMassFractions(part.composition);
		for (const element of Object.keys(elements) as (keyof typeof elements)[])
			elements[element] += share * own[element];
	}
	const mixed = compositionFromMass(elements);
	return {
		massFractions,
		densityKgM3,
		lhvMjKg,
		hydrogenCarbonRatio: mixed.hydrogen,
		oxygenCarbonRatio: mixed.oxygen,
		oxygenMassPct: 100 * elements.oxygen,
		afrStoich: stoichiometricAfr(mixed)
	};
}
