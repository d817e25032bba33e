import { blendFuels, type Blend } from '../../../src/lib/domain/formulas/blend';
import * as fuel from '../../../src/lib/domain/formulas/fuel';
import { MOLAR_MASS, OXYGEN_IN_DRY_AIR } from '../../../src/lib/domain/formulas/constants';
import { input, type Check, type Entry } from '../entries';

const atoms = (carbon: number, hydrogen = 0, oxygen = 0, nitrogen = 0): fuel.Composition => ({
	carbon,
	hydrogen,
	oxygen,
	nitrogen
});

/** Molecules whose printed molar mass is the sum of the printed atomic masses. */
const MOLECULES: Record<string, fuel.Composition> = {
	C: atoms(1),
	H: atoms(0, 1),
	O: atoms(0, 0, 1),
	N: atoms(0, 0, 0, 1),
	S: { ...atoms(0), sulfur: 1 },
	H2: atoms(0, 2),
	O2: atoms(0, 0, 2),
	N2: atoms(0, 0, 0, 2),
	H2O: atoms(0, 2, 1),
	CO: atoms(1, 0, 1),
	CO2: atoms(1, 0, 2),
	CH3OH: atoms(1, 4, 1),
	C2H5OH: atoms(2, 6, 1),
	C2H6: atoms(2, 6),
	C3H8: atoms(3, 8),
	NOxasNO2: atoms(0, 0, 2, 1),
	N2O: atoms(0, 0, 1, 2),
	NH3: atoms(0, 3, 0, 1),
	urea: atoms(1, 4, 1, 2),
	THCC1alpha185: atoms(1, 1.85)
};

const MOLECULAR: Record<string, fuel.Composition> = {
	'iso-octane': atoms(8, 18),
	'n-heptane': atoms(7, 16),
	toluene: atoms(7, 8),
	ethanol: atoms(2, 6, 1),
	methanol: atoms(1, 4, 1),
	methane: atoms(1, 4),
	propane: atoms(3, 8)
};

const last = (entry: Entry, prefix: string) => entry.id.slice(prefix.length);

const moleculeMass = (entry: Entry) => {
	const name = last(entry, 'cfr1065.1005-M-');
	if (name === 'airdry') return MOLAR_MASS.dryAir;
	if (name === 'H2O') return MOLAR_MASS.water;
	return fuel.formulaMass(MOLECULES[name]!);
};

const ratios = (entry: Entry) => {
	const whole = fuel.elementMassFractions(MOLECULAR[last(entry, 'fuel-HC-')]!);
	const { hydrogen, oxygen } = fuel.compositionFromMass(whole);
	return [hydrogen, oxygen];
};

const fromMass = (entry: Entry) =>
	fuel.compositionFromMass({
		carbon: input(entry, 'wC'),
		hydrogen: input(entry, 'wH'),
		oxygen: input(entry, 'wO'),
		nitrogen: input(entry, 'wN'),
		sulfur: input(entry, 'wS')
	});

/** Gasoline CH1.85, 745 kg/m³, 42.70 MJ/kg with ethanol, 789.32 kg/m³, 26.81 MJ/kg: the components of the blend entries. */
const ethanolBlend = (entry: Entry): Blend => {
	const share = Number(/^blend-E(\d+)-/.exec(entry.id)![1]) / 100;
	const blend = blendFuels([
		{
			name: 'ethanol',
			volumeFraction: share,
			densityKgM3: 789.32,
			lhvMjKg: 26.81,
			composition: atoms(2, 6, 1)
		},
		{
			name: 'gasoline',
			volumeFraction: 1 - share,
			densityKgM3: 745,
			lhvMjKg: 42.7,
			composition: atoms(1, 1.85)
		}
	]);
	if ('problem' in blend) throw new Error(blend.problem);
	return blend;
};

export const FUEL_CHECKS: readonly Check[] = [
	{ match: /^cfr1065\.1005-M-(?!CH4$|Ar$)/, run: moleculeMass },
	{ match: /^cfr1065\.1005-x-O2$/, run: () => OXYGEN_IN_DRY_AIR },
	{
		match: /^cfr1065\.655-wC$/,
		run: (e) =>
			fuel.elementMassFractions({
				...atoms(1, input(e, 'alpha'), input(e, 'beta'), input(e, 'delta')),
				sulfur: input(e, 'gamma')
			}).carbon
	},
	{ match: /^cfr1065\.655-alpha$/, run: (e) => fromMass(e).hydrogen },
	{ match: /^cfr1065\.655-beta$/, run: (e) => fromMass(e).oxygen },
	{ match: /^cfr1065\.655-gamma$/, run: (e) => fromMass(e).sulfur! },
	{ match: /^cfr1065\.655-delta$/, run: (e) => fromMass(e).nitrogen! },
	{
		match: /^fuel-AFRst-/,
		run: (e) => fuel.stoichiometricAfr(atoms(input(e, 'C'), input(e, 'H'), input(e, 'O')))
	},
	{ match: /^fuel-HC-/, run: ratios },
	{ match: /^(gas|diesel)-CH1\d+-AFR$/, run: (e) => fuel.stoichiometricAfr(atoms(1, input(e, 'alpha'))) },
	{ match: /^blend-E\d+-massfrac$/, run: (e) => ethanolBlend(e).massFractions.ethanol! },
	{ match: /^blend-E\d+-density$/, run: (e) => ethanolBlend(e).densityKgM3 },
	{ match: /^blend-E\d+-LHV$/, run: (e) => ethanolBlend(e).lhvMjKg },
	{
		match: /^blend-E\d+-HC$/,
		run: (e) => [ethanolBlend(e).hydrogenCarbonRatio, ethanolBlend(e).oxygenCarbonRatio]
	},
	{ match: /^blend-E\d+-AFR$/, run: (e) => ethanolBlend(e).afrStoich }
];
