import { describe, expect, it } from 'vitest';
import { blendOf, sumProblem } from './blend-of';

const petrol = {
	name: 'Petrol',
	volumeFraction: 0.9,
	densityKgM3: 740,
	lhvMjKg: 43,
	hydrogenCarbonRatio: 1.87
};
const ethanol = {
	name: 'Ethanol',
	volumeFraction: 0.1,
	densityKgM3: 794,
	lhvMjKg: 26.8,
	hydrogenCarbonRatio: 3,
	oxygenCarbonRatio: 0.5
};

describe('a fuel by its components', () => {
	it('mixes density by volume and heating value by mass', () => {
		const blend = blendOf([petrol, ethanol])!;
		expect(blend.densityKgM3).toBeCloseTo(0.9 * 740 + 0.1 * 794, 9);
		expect(blend.lhvMjKg).toBeCloseTo((0.9 * 740 * 43 + 0.1 * 794 * 26.8) / (0.9 * 740 + 0.1 * 794), 9);
		expect(blend.oxygenMassPct).toBeGreaterThan(3);
		expect(blend.oxygenMassPct).toBeLessThan(4);
	});
	it('says nothing where a component is not known well enough', () => {
		expect(blendOf([petrol, { name: 'Other', volumeFraction: 0.1 }])).toBeNull();
		expect(blendOf([petrol])).toBeNull();
		expect(blendOf(null)).toBeNull();
	});
	it('tells how far the parts are from a whole', () => {
		expect(sumProblem([petrol, ethanol])).toBeNull();
		expect(sumProblem([petrol])).toBe('The parts add up to 90.0 %; they must add up to 100 %.');
	});
});
