import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { blendFuels, type BlendComponent } from './blend';
import * as fuel from './fuel';

const ethanol = { carbon: 2, hydrogen: 6, oxygen: 1 };
const gasoline = fuel.compositionOf(1.85);
const part = (
	name: string,
	volumeFraction: number,
	densityKgM3: number,
	lhvMjKg: number,
	composition: fuel.Composition
) => ({ name, volumeFraction, densityKgM3, lhvMjKg, composition }) satisfies BlendComponent;

describe('composition', () => {
	const share = fc.double({ min: 0.001, max: 4, noNaN: true });
	it('goes to mass and back', () => {
		fc.assert(
			fc.property(share, share, share, (hydrogen, oxygen, nitrogen) => {
				const mass = fuel.elementMassFractions({ carbon: 1, hydrogen, oxygen, nitrogen });
				expect(Object.values(mass).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 12);
				const back = fuel.compositionFromMass(mass);
				expect(back.hydrogen).toBeCloseTo(hydrogen, 10);
				expect(back.oxygen).toBeCloseTo(oxygen, 10);
				expect(back.nitrogen).toBeCloseTo(nitrogen, 10);
				expect(back.sulfur).toBe(0);
			})
		);
	});

	it('counts in proportion: C2H6O is CH3O0.5', () => {
		expect(fuel.stoichiometricAfr(ethanol)).toBeCloseTo(
			fuel.stoichiometricAfr(fuel.compositionOf(3, 0.5)),
			12
		);
		expect(fuel.oxygenMassPct(ethanol)).toBeCloseTo(34.73, 2);
	});

	it('asks for less air the more oxygen the fuel carries, and none is no number', () => {
		expect(fuel.stoichiometricAfr(fuel.compositionOf(2, 0.2))).toBeLessThan(
			fuel.stoichiometricAfr(fuel.compositionOf(2, 0.1))
		);
		expect(fuel.stoichiometricAfr({ carbon: 1, hydrogen: 0, oxygen: 2 })).toBeNaN();
	});
});

describe('density', () => {
	it('is that of 15 °C at 15 °C and falls with heat', () => {
		expect(fuel.fuelDensityKgM3(745, 15)).toBe(745);
		expect(fuel.fuelDensityKgM3(745, 35, 0.001)).toBeCloseTo(745 / 1.02, 10);
		expect(fuel.fuelDensityKgM3(745, 35)).toBeLessThan(745);
		expect(fuel.fuelDensityKgM3(745, 5)).toBeGreaterThan(745);
	});

	it('takes a common expansion where none is given, without a step between the product groups over 0.5 %', () => {
		expect(fuel.defaultExpansionPerK(745)).toBeCloseTo(1.213e-3, 6);
		expect(fuel.defaultExpansionPerK(835)).toBeCloseTo(8.53e-4, 6);
		for (const edge of [770, 787.5, 838.5]) {
			const [below, above] = [fuel.defaultExpansionPerK(edge - 1e-6), fuel.defaultExpansionPerK(edge)];
			expect(Math.abs(above / below - 1), String(edge)).toBeLessThan(0.005);
		}
		expect(fuel.defaultExpansionPerK(600)).toBeNaN();
		expect(fuel.defaultExpansionPerK(NaN)).toBeNaN();
	});

	it('turns a volume flow into a mass flow', () => {
		expect(fuel.massFlowKgH(10, 745)).toBeCloseTo(7.45, 12);
	});
});

describe('a batch', () => {
	it('takes a stated ratio before a computed one and says which', () => {
		expect(
			fuel.batchAfrStoich({ afrStoich: { value: 14.5, u: 0.05 }, hydrogenCarbonRatio: { value: 1.85 } })
		).toEqual({
			value: 14.5,
			u: 0.05,
			from: 'measured'
		});
		const computed = fuel.batchAfrStoich({ hydrogenCarbonRatio: { value: 1.85 } });
		expect(computed?.from).toBe('computed');
		expect(computed?.value).toBeCloseTo(14.577, 3);
		expect(fuel.batchAfrStoich({ oxygenCarbonRatio: { value: 0 } })).toBeNull();
	});

	it('makes the oxygen ratio of the oxygen content where only that is stated', () => {
		const found = fuel.batchAfrStoich({
			hydrogenCarbonRatio: { value: 3 },
			oxygenMassPct: { value: fuel.oxygenMassPct(ethanol) }
		});
		expect(found?.value).toBeCloseTo(fuel.stoichiometricAfr(ethanol), 10);
	});

	it('is told where its statements disagree by more than 1 %', () => {
		const facts = { hydrogenCarbonRatio: { value: 3 }, oxygenCarbonRatio: { value: 0.5 } };
		expect(
			fuel.fuelDisagreements({ ...facts, afrStoich: { value: 9 }, oxygenMassPct: { value: 34.7 } })
		).toEqual([]);
		expect(fuel.fuelDisagreements({ ...facts, afrStoich: { value: 14.7 } })).toEqual([
			'The stated composition makes a stoichiometric air-fuel ratio of 9.01; the batch states 14.7.'
		]);
		expect(fuel.fuelDisagreements({ ...facts, oxygenMassPct: { value: 30 } })).toEqual([
			'H/C 3 and O/C 0.5 make 34.73 % oxygen by mass; the batch states 30 %.'
		]);
		expect(fuel.fuelDisagreements({ afrStoich: { value: 9 } })).toEqual([]);
		expect(fuel.fuelDisagreements({})).toEqual([]);
	});

	it('lets the rounding of a certificate pass: 0.04 % oxygen is not 0.00', () => {
		expect(
			fuel.fuelDisagreements({
				hydrogenCarbonRatio: { value: 1.9 },
				oxygenCarbonRatio: { value: 0 },
				oxygenMassPct: { value: 0.04 }
			})
		).toEqual([]);
	});
});

describe('blends', () => {
	const e = (share: number) => [
		part('ethanol', share, 789.32, 26.81, ethanol),
		part('gasoline', 1 - share, 745, 42.7, gasoline)
	];

	it('ends at its components', () => {
		const neat = blendFuels(e(1));
		expect(neat).toMatchObject({ densityKgM3: 789.32, lhvMjKg: 26.81 });
		if ('problem' in neat) throw new Error(neat.problem);
		expect(neat.hydrogenCarbonRatio).toBeCloseTo(3, 12);
		expect(neat.oxygenCarbonRatio).toBeCloseTo(0.5, 12);
		expect(neat.afrStoich).toBeCloseTo(fuel.stoichiometricAfr(ethanol), 10);
		expect(neat.oxygenMassPct).toBeCloseTo(fuel.oxygenMassPct(ethanol), 10);
	});

	it('lies between its components, and its mass fractions add up', () => {
		fc.assert(
			fc.property(fc.double({ min: 0.01, max: 0.99, noNaN: true }), (share) => {
				const blend = blendFuels(e(share));
				if ('problem' in blend) throw new Error(blend.problem);
				expect(blend.lhvMjKg).toBeGreaterThan(26.81);
				expect(blend.lhvMjKg).toBeLessThan(42.7);
				expect(blend.afrStoich).toBeLessThan(fuel.stoichiometricAfr(gasoline));
				expect(Object.values(blend.massFractions).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 12);
				// AFR_st mixes by mass fraction: an identity of the oxygen balance.
				const w = blend.massFractions.ethanol!;
				const mixed = w * fuel.stoichiometricAfr(ethanol) + (1 - w) * fuel.stoichiometricAfr(gasoline);
				expect(blend.afrStoich).toBeCloseTo(mixed, 9);
			})
		);
	});

	it.each([
		['fractions that do not add up', [part('a', 0.5, 700, 40, gasoline)], /add up to 0\.500/],
		[
			'a fraction below zero',
			[part('a', -0.1, 700, 40, gasoline), part('b', 1.1, 700, 40, gasoline)],
			/below zero/
		],
		['a component without density', [part('a', 1, 0, 40, gasoline)], /density/],
		['nothing', [], /add up to 0\.000/]
	])('refuses %s', (_, components, sentence) => {
		expect(blendFuels(components)).toEqual({ problem: expect.stringMatching(sentence) });
	});
});
