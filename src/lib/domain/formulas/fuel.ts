import type { FuelFacts, FuelPropertyName } from '../model';
import { MOLAR_MASS, OXYGEN_IN_DRY_AIR } from './constants';

/** Atoms of a fuel, per carbon or per molecule alike: only their proportion counts. */
export interface Composition {
	carbon: number;
	hydrogen: number;
	oxygen: number;
	nitrogen?: number;
	sulfur?: number;
}

const ELEMENTS = ['carbon', 'hydrogen', 'oxygen', 'nitrogen', 'sulfur'] as const;
type Element = (typeof ELEMENTS)[number];

/** A fuel from its molar ratios to carbon. */
export const compositionOf = (hydrogenCarbonRatio: number, oxygenCarbonRatio = 0): Composition => ({
	carbon: 1,
	hydrogen: hydrogenCarbonRatio,
	oxygen: oxygenCarbonRatio
});

/** Mass per formula unit, atomic masses of 40 CFR 1065.1005. @returns g/mol */
export function formulaMass(fuel: Composition): number {
	return ELEMENTS.reduce((sum, element) => sum + (fuel[element] ?? 0) * MOLAR_MASS[element], 0);
}

/** Mass fraction of each element, 40 CFR 1065.655(d). @returns kg/kg; they add up to 1 */
export function elementMassFractions(fuel: Composition): Record<Element, number> {
	const whole = formulaMass(fuel);
	const share = (element: Element) => ((fuel[element] ?? 0) * MOLAR_MASS[element]) / whole;
	return Object.fromEntries(ELEMENTS.map((element) => [element, share(element)])) as Record<Element, number>;
}

/** Atoms per carbon from mass fractions, 40 CFR 1065.655(e)(4). @param fractions kg/kg, carbon above 0 */
export function compositionFromMass(fractions: Record<Element, number>): Composition {
	const moles = (element: Element) => fractions[element] / MOLAR_MASS[element];
	const perCarbon = (element: Element) => moles(element) / moles('carbon');
	return {
		carbon: 1,
		hydrogen: perCarbon('hydrogen'),
		oxygen: perCarbon('oxygen'),
		nitrogen: perCarbon('nitrogen'),
		sulfur: perCarbon('sulfur')
	};
}

/**
 * Stoichiometric air-fuel ratio by oxygen balance with the dry air of 40 CFR 1065.1005:
 * `(c + h/4 − o/2 + s)·(M_air/0.209445)/M_fuel`; nitrogen leaves as N2.
 * @returns kg dry air per kg fuel; NaN for a fuel that needs no air
 */
export function stoichiometricAfr(fuel: Composition): number {
	const oxygenNeeded = fuel.carbon + fuel.hydrogen / 4 - fuel.oxygen / 2 + (fuel.sulfur ?? 0);
	const afr = (oxygenNeeded * (MOLAR_MASS.dryAir / OXYGEN_IN_DRY_AIR)) / formulaMass(fuel);
	return afr > 0 ? afr : NaN;
}

/** Oxygen content. @returns mass % */
export const oxygenMassPct = (fuel: Composition): number => 100 * elementMassFractions(fuel).oxygen;

/**
 * Expansion coefficient near 15 °C where the batch states none: the generalized products of API MPMS 11.1 (ASTM D1250),
 * `α_15 = K0/ρ² + K1/ρ` by density. Made for hydrocarbons; neat alcohols lie within about 10 % of it.
 * @param density15KgM3 density at 15 °C, 653 to 1075 kg/m³ @returns 1/K; NaN outside that range
 */
export function defaultExpansionPerK(density15KgM3: number): number {
	const d = density15KgM3;
	if (!(d >= 653 && d <= 1075)) return NaN;
	if (d < 770) return 346.4228 / d ** 2 + 0.4388 / d;
	if (d < 787.5) return 2680.3206 / d ** 2 - 0.00336312;
	return d < 838.5 ? 594.5418 / d ** 2 : 186.9696 / d ** 2 + 0.4862 / d;
}

/**
 * Liquid density at a temperature: `ρ15/(1 + β·(t − 15))`.
 * @param density15KgM3 at 15 °C, kg/m³ @param temperatureC °C, within some tens of degrees of 15
 * @param expansionPerK β of the batch, 1/K; left out, `defaultExpansionPerK`
 * @returns kg/m³
 */
export function fuelDensityKgM3(
	density15KgM3: number,
	temperatureC: number,
	expansionPerK = defaultExpansionPerK(density15KgM3)
): number {
	return density15KgM3 / (1 + expansionPerK * (temperatureC - 15));
}

/** Mass flow of a volume flow, `ρ·V̇`. @param volumeFlowLH L/h @param densityKgM3 at the meter's temperature, kg/m³ @returns kg/h */
export function massFlowKgH(volumeFlowLH: number, densityKgM3: number): number {
	return (volumeFlowLH * densityKgM3) / 1000;
}

export interface Resolved {
	value: number;
	/** Standard uncertainty where the batch states one. */
	u: number | null;
	from: 'measured' | 'computed';
}

const ratio = (facts: FuelFacts, name: FuelPropertyName) => facts[name]?.value ?? null;

/** Composition from what a batch states; oxygen from O/C, else from its mass %, else none. Null without H/C. */
function statedComposition(facts: FuelFacts): Composition | null {
	const hc = ratio(facts, 'hydrogenCarbonRatio');
	if (hc === null) return null;
	const oc = ratio(facts, 'oxygenCarbonRatio');
	const pct = ratio(facts, 'oxygenMassPct');
	if (oc !== null || pct === null) return compositionOf(hc, oc ?? 0);
	// w_O = o·M_O/(M_C + h·M_H + o·M_O), solved for o.
	const w = pct / 100;
	const rest = MOLAR_MASS.carbon + hc * MOLAR_MASS.hydrogen;
	return compositionOf(hc, (w * rest) / (MOLAR_MASS.oxygen * (1 - w)));
}

/** AFR_st of a batch: its own where stated, else from its composition; null where neither is known. Measured beats computed. */
export function batchAfrStoich(facts: FuelFacts): Resolved | null {
	const stated = facts.afrStoich;
	if (stated) return { value: stated.value, u: stated.u ?? null, from: 'measured' };
	const fuel = statedComposition(facts);
	return fuel ? { value: stoichiometricAfr(fuel), u: null, from: 'computed' } : null;
}

/**
 * Where the stated H/C, O/C, oxygen mass % and AFR_st of a batch disagree by more than 1 % (oxygen: and by more than 0.05 mass %, the
 * rounding of a certificate).
 * @returns a sentence for each disagreement, none where they agree or too little is stated
 */
export function fuelDisagreements(facts: FuelFacts): string[] {
	const hc = ratio(facts, 'hydrogenCarbonRatio');
	const oc = ratio(facts, 'oxygenCarbonRatio');
	const pct = ratio(facts, 'oxygenMassPct');
	const afr = ratio(facts, 'afrStoich');
	const apart = (a: number, b: number) => Math.abs(a - b) > 0.01 * Math.max(Math.abs(a), Math.abs(b));
	const sentences: string[] = [];
	if (hc !== null && oc !== null && pct !== null) {
		const computed = oxygenMassPct(compositionOf(hc, oc));
		if (apart(computed, pct) && Math.abs(computed - pct) > 0.05)
			sentences.push(
				`H/C ${hc} and O/C ${oc} make ${computed.toFixed(2)} % oxygen by mass; the batch states ${pct} %.`
			);
	}
	const fuel = statedComposition(facts);
	if (fuel && afr !== null) {
		const computed = stoichiometricAfr(fuel);
		if (apart(computed, afr))
			sentences.push(
				`The stated composition makes a stoichiometric air-fuel ratio of ${computed.toFixed(2)}; the batch states ${afr}.`
			);
	}
	return sentences;
}
