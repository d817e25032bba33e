import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CORRECTIONS, INDUCTIONS } from '../model';
import * as correct from './corrections';
import { siteRating } from './site-rating';

const spark: correct.CorrectionInputs = {
	ignition: 'spark',
	induction: 'natural',
	pressureKpa: 98.2,
	vapourKpa: 1.7,
	temperatureC: 27
};
const diesel: correct.CorrectionInputs = {
	...spark,
	ignition: 'compression',
	induction: 'turbo',
	fuelMgL: 80,
	boostRatio: 1.9
};
const factor = (outcome: correct.CorrectionOutcome) =>
	'refused' in outcome ? outcome.refused : outcome.factor;
const refusal = (outcome: correct.CorrectionOutcome) => ('refused' in outcome ? outcome.refused : null);

describe('every correction is 1 at its reference', () => {
	it('dry 99 kPa and 25 °C', () => {
		expect(correct.saeJ1349(99, 25)).toEqual({ factor: 1, inRange: true });
		expect(correct.iso1585Spark(99, 25)).toEqual({ factor: 1, inRange: true });
		for (const induction of INDUCTIONS)
			for (const fuelMgL of [10, 50, 90])
				expect(correct.iso1585Compression(99, 25, induction, fuelMgL, 1)).toEqual({
					factor: 1,
					inRange: true
				});
	});
	it('DIN 70020: total 101.325 kPa and 20 °C, or the 1013 mbar as printed', () => {
		expect(correct.din70020(101.325, 20)).toEqual({ factor: 1, inRange: true });
		expect(correct.din70020(101.3, 20, 101.3)).toEqual({ factor: 1, inRange: true });
	});
	it('ISO 3046-1', () => {
		const at = { pressureKpa: 100, temperatureK: 298, humidity: 0.3, saturationKpa: 3.2, coolantK: 298 };
		expect(siteRating(at, at, { a: 1, m: 1, n: 0.75, s: 0 }, 0.85)).toEqual({ k: 1, alpha: 1, beta: 1 });
	});
	it('none is 1 anywhere', () => {
		expect(correct.correctionFactor('none', { ...spark, pressureKpa: NaN })).toEqual({
			factor: 1,
			inRange: true
		});
	});
});

describe('corrections move the right way', () => {
	const dry = fc.double({ min: 70, max: 110, noNaN: true });
	const celsius = fc.double({ min: -10, max: 50, noNaN: true });
	const methods = [
		(p: number, t: number) => correct.saeJ1349(p, t).factor,
		(p: number, t: number) => correct.iso1585Spark(p, t).factor,
		(p: number, t: number) => correct.din70020(p, t).factor,
		...INDUCTIONS.map(
			(induction) => (p: number, t: number) => correct.iso1585Compression(p, t, induction, 55, 1).factor
		)
	];
	it('thin and hot air asks for more', () => {
		fc.assert(
			fc.property(dry, celsius, fc.constantFrom(...methods), (p, t, method) => {
				expect(method(p - 0.5, t)).toBeGreaterThan(method(p, t));
				expect(method(p, t + 0.5)).toBeGreaterThan(method(p, t));
			})
		);
	});
	it('vapour counts for the dry-pressure methods and not for DIN 70020', () => {
		const moist = { ...spark, vapourKpa: 3 };
		for (const method of ['sae_j1349', 'iso_1585'] as const)
			expect(factor(correct.correctionFactor(method, moist))).toBeGreaterThan(
				factor(correct.correctionFactor(method, spark)) as number
			);
		expect(factor(correct.correctionFactor('din_70020', moist))).toBe(
			factor(correct.correctionFactor('din_70020', spark))
		);
	});
});

describe('ranges', () => {
	it.each([
		['SAE J1349 at 14.9 °C', correct.saeJ1349(99, 14.9), /15 to 35 °C/],
		['SAE J1349 at 35.1 °C', correct.saeJ1349(99, 35.1), /35\.1 °C/],
		['SAE J1349 at 89.9 kPa', correct.saeJ1349(89.9, 25), /90 to 105 kPa/],
		['SAE J1349 beyond 7 %', correct.saeJ1349(92, 30), /0\.93 to 1\.07/],
		['α_a beyond 1.07', correct.iso1585Spark(92, 30), /0\.93 to 1\.07/],
		['α_a below 0.93', correct.iso1585Spark(105, 15), /0\.93 to 1\.07/],
		['α_c beyond 1.1', correct.iso1585Compression(85, 35, 'natural', 65, 1), /0\.9 to 1\.1/]
	])('%s: shown, with its reason', (_, found, reason) => {
		expect(found.inRange).toBe(false);
		expect(found.reason).toMatch(reason);
		expect(found.factor).toBeGreaterThan(0.8);
	});
	it.each([
		['SAE J1349 at 15 °C', correct.saeJ1349(97, 15)],
		['SAE J1349 at 35 °C', correct.saeJ1349(99, 35)],
		['α_a in its range', correct.iso1585Spark(95, 30)],
		['DIN 70020, which states none', correct.din70020(80, 40)]
	])('%s is in range', (_, found) => {
		expect(found).not.toHaveProperty('reason');
		expect(found.inRange).toBe(true);
	});
});

describe('engine factor', () => {
	it('is 0.3 below 40, 1.2 above 65 and a line between, without a step', () => {
		expect(correct.engineFactor(10)).toBe(0.3);
		expect(correct.engineFactor(39.999)).toBe(0.3);
		expect(correct.engineFactor(40)).toBeCloseTo(0.3, 12);
		expect(correct.engineFactor(52.5)).toBeCloseTo(0.75, 12);
		expect(correct.engineFactor(65)).toBeCloseTo(1.2, 12);
		expect(correct.engineFactor(90)).toBe(1.2);
	});
	it('counts fuel per litre and cycle', () => {
		// 18 kg/h = 5 g/s; four-stroke: 120 000·5/(2·4000).
		expect(correct.fuelPerCycleMgL(18, 2, 4000, 2)).toBeCloseTo(75, 10);
		expect(correct.fuelPerCycleMgL(18, 2, 4000, 1)).toBeCloseTo(37.5, 10);
		expect(correct.fuelPerCycleMgL(18, 2, 0, 2)).toBeNaN();
	});
});

describe('the chooser', () => {
	it('takes the form of the engine', () => {
		const dryKpa = 98.2 - 1.7;
		expect(correct.correctionFactor('sae_j1349', spark)).toEqual(correct.saeJ1349(dryKpa, 27));
		expect(correct.correctionFactor('iso_1585', spark)).toEqual(correct.iso1585Spark(dryKpa, 27));
		expect(correct.correctionFactor('iso_1585', diesel)).toEqual(
			correct.iso1585Compression(dryKpa, 27, 'turbo', 80, 1.9)
		);
		expect(correct.correctionFactor('din_70020', spark)).toEqual(correct.din70020(98.2, 27));
	});

	it('takes a natural engine at a ratio of 1, and no charged one below it', () => {
		const natural = { ...diesel, induction: 'natural' as const, boostRatio: null };
		expect(factor(correct.correctionFactor('iso_1585', natural))).toBe(
			correct.iso1585Compression(96.5, 27, 'natural', 80, 1).factor
		);
		expect(factor(correct.correctionFactor('iso_1585', { ...diesel, boostRatio: 0.98 }))).toBe(
			correct.iso1585Compression(96.5, 27, 'turbo', 80, 1).factor
		);
	});

	it.each([
		['SAE J1349 for compression ignition', 'sae_j1349', diesel, /spark ignition.*ISO 1585/],
		['α_c without induction', 'iso_1585', { ...diesel, induction: null }, /induction.*turbo_cooled/],
		['α_c without fuel', 'iso_1585', { ...diesel, fuelMgL: null }, /fuel flow/],
		['α_c without boost', 'iso_1585', { ...diesel, boostRatio: undefined }, /compressor outlet/],
		['an unknown barometer', 'iso_1585', { ...spark, pressureKpa: NaN }, /barometer/],
		['a barometer in hPa', 'din_70020', { ...spark, pressureKpa: 982 }, /barometer/],
		['an unknown temperature', 'sae_j1349', { ...spark, temperatureC: NaN }, /temperature/],
		['an unknown humidity', 'sae_j1349', { ...spark, vapourKpa: NaN }, /humidity/],
		['ISO 3046-1 on a run', 'iso_3046', spark, /rates an engine for a site/]
	] as const)('refuses %s with a sentence', (_, method, inputs, sentence) => {
		expect(refusal(correct.correctionFactor(method, inputs))).toMatch(sentence);
		expect(refusal(correct.correctionFactor(method, inputs))).toMatch(/^[A-Z].*\.$/);
	});

	it('answers for every method', () => {
		for (const method of CORRECTIONS)
			for (const inputs of [spark, diesel]) {
				const outcome = correct.correctionFactor(method, inputs);
				expect('refused' in outcome || Number.isFinite(outcome.factor)).toBe(true);
			}
	});
});
