import fc from 'fast-check';
import jstat from 'jstat';
import { describe, expect, it } from 'vitest';
import { hampelSpikes } from './hampel';
import { fitAt, quadraticAt } from './local-fit';
import {
	coefficientOfVariation,
	mean,
	median,
	medianAbsoluteDeviation,
	quantile,
	standardDeviation,
	summarise
} from './moments';
import { tCumulative, tQuantile } from './student-t';

const numbers = (min: number, max: number) =>
	fc.array(fc.double({ min: -1e3, max: 1e3, noNaN: true }), { minLength: min, maxLength: max });

describe('moments', () => {
	it('leaves unknown samples out', () => {
		expect(mean([1, NaN, 3])).toBe(2);
		expect(standardDeviation([1, NaN, 3])).toBeCloseTo(Math.SQRT2, 14);
		expect(median([NaN, 5, 1, 3])).toBe(3);
	});

	it('knows nothing of nothing', () => {
		for (const of of [mean, median, standardDeviation, medianAbsoluteDeviation, coefficientOfVariation])
			expect(of([])).toBeNaN();
		expect(standardDeviation([4])).toBeNaN();
		expect(coefficientOfVariation([-1, 1])).toBeNaN();
		expect(quantile([], 0.5)).toBeNaN();
		expect(quantile([1], 1.5)).toBeNaN();
	});

	it('keeps a small spread on a large level', () => {
		const level = Float64Array.from({ length: 10_001 }, (_, i) => 1e9 + (i % 2 === 0 ? 0.5 : -0.5));
		expect(standardDeviation(level)).toBeCloseTo(0.5, 3);
	});

	it('interpolates quantiles between order statistics', () => {
		expect(quantile([4, 1, 3, 2], 0)).toBe(1);
		expect(quantile([4, 1, 3, 2], 0.25)).toBe(1.75);
		expect(quantile([4, 1, 3, 2], 0.5)).toBe(2.5);
		expect(quantile([4, 1, 3, 2], 1)).toBe(4);
	});

	it('has a median absolute deviation that one wild sample does not move', () => {
		expect(medianAbsoluteDeviation([1, 2, 3, 4, 5])).toBe(1);
		expect(medianAbsoluteDeviation([1, 2, 3, 4, 5_000])).toBe(1);
	});

	it('gives the interval of a mean', () => {
		// t(0.975, 4) = 2.776; sd = sqrt(2.5).
		const { n, mean: middle, interval } = summarise([1, 2, 3, 4, 5]);
		expect([n, middle]).toEqual([5, 3]);
		expect(interval![1] - 3).toBeCloseTo((2.7764451051977987 * Math.sqrt(2.5)) / Math.sqrt(5), 10);
		expect(summarise([7])).toEqual({ n: 1, mean: 7, sd: NaN, interval: null });
		expect(summarise([2, 2, 2]).interval).toEqual([2, 2]);
	});
});

describe("Student's t", () => {
	it.each([1, 2, 3.7, 11.76, 30, 326, 5000])(
		'agrees with a statistics library at %f degrees of freedom',
		(df) => {
			for (const p of [0.6, 0.9, 0.95, 0.975, 0.995]) {
				expect(tQuantile(p, df) / jstat.jStat.studentt.inv(p, df) - 1).toBeCloseTo(0, 7);
				expect(tCumulative(tQuantile(p, df), df)).toBeCloseTo(p, 11);
				expect(tQuantile(1 - p, df)).toBeCloseTo(-tQuantile(p, df), 9);
			}
		}
	);

	it('has its closed forms at 1 and 2 degrees of freedom', () => {
		for (const p of [0.51, 0.7, 0.975, 0.9999]) {
			expect(tQuantile(p, 1) / Math.tan(Math.PI * (p - 0.5)) - 1).toBeCloseTo(0, 10);
			const two = (2 * p - 1) / Math.sqrt(2 * p * (1 - p));
			expect(tQuantile(p, 2) / two - 1).toBeCloseTo(0, 10);
		}
	});

	it('is zero in the middle and unknown outside its range', () => {
		expect(tQuantile(0.5, 8)).toBeCloseTo(0, 12);
		for (const [p, df] of [
			[0, 5],
			[1, 5],
			[NaN, 5],
			[0.9, 0],
			[0.9, NaN]
		] as const)
			expect(tQuantile(p, df)).toBeNaN();
	});
});

describe('local fit', () => {
	const x = Float64Array.from({ length: 41 }, (_, i) => 1e5 + i * 0.05);
	const y = x.map((value) => 3 - 2 * (value - 1e5 - 1) + 0.5 * (value - 1e5 - 1) ** 2);

	it('finds a quadratic far from the origin', () => {
		const fit = fitAt(x, y, 0, x.length, 1e5 + 1, 2)!;
		expect(fit[0]).toBeCloseTo(3, 9);
		expect(fit[1]).toBeCloseTo(-2, 9);
		expect(fit[2]).toBeCloseTo(0.5, 9);
	});

	it('has a short way for one fit per sample that gives the same', () => {
		fc.assert(
			fc.property(numbers(5, 40), fc.integer({ min: 0, max: 4 }), (values, at) => {
				const times = values.map((_, i) => 100 + i * 0.02);
				const full = fitAt(times, values, 0, values.length, times[at]!, 2)!;
				const short = quadraticAt(times, values, 0, values.length, times[at]!, 3)!;
				expect(short[0]).toBeCloseTo(full[0]!, 5);
				expect(short[1] / 1e3).toBeCloseTo(full[1]! / 1e3, 5);
			})
		);
	});

	it('leaves unknown samples out and says when too few are left', () => {
		const holed = y.map((value, i) => (i % 3 === 0 ? NaN : value));
		expect(fitAt(x, holed, 0, x.length, 1e5 + 1, 2)![1]).toBeCloseTo(-2, 9);
		expect(quadraticAt(x, holed, 0, x.length, 1e5 + 1, 5)![1]).toBeCloseTo(-2, 9);
		expect(fitAt([0, 1], [0, 1], 0, 2, 0, 2)).toBeNull();
		expect(fitAt([1, 1, 1], [1, 2, 3], 0, 3, 1, 1)).toBeNull();
		expect(fitAt([1, 1, 1], [1, 2, 3], 0, 3, 1, 0)).toEqual([2]);
		expect(fitAt([0, 0, 1, 1], [1, 2, 3, 4], 0, 4, 0, 2)).toBeNull();
		expect(quadraticAt([0, 0, 1, 1], [1, 2, 3, 4], 0, 4, 0, 3)).toBeNull();
		expect(quadraticAt([5, 5, 5], [1, 2, 3], 0, 3, 5, 3)).toBeNull();
		expect(quadraticAt([0, 1, 2], [1, 2, 3], 0, 3, 1, 5)).toBeNull();
	});
});

describe('Hampel', () => {
	/** The definition, slowly: what the ordered window must reproduce. */
	const slow = (values: ArrayLike<number>, half: number, threshold: number, floor: number) =>
		Array.from(values, (value, i) => {
			const window = Array.from(values)
				.slice(Math.max(0, i - half), i + half + 1)
				.filter(Number.isFinite);
			if (!Number.isFinite(value) || window.length < 3) return 0;
			const distance = Math.abs(value - median(window));
			const scale = threshold * 1.482602218505602 * medianAbsoluteDeviation(window);
			return distance > Math.max(scale, floor) ? 1 : 0;
		});

	it('is the definition', () => {
		const sample = fc.oneof(fc.integer({ min: -20, max: 20 }), fc.constant(NaN), fc.constant(500));
		fc.assert(
			fc.property(
				fc.array(sample, { maxLength: 60 }),
				fc.integer({ min: 1, max: 8 }),
				fc.constantFrom(0, 2.5),
				(values, half, floor) => {
					expect([...hampelSpikes(values, half, 3, floor)]).toEqual(slow(values, half, 3, floor));
				}
			)
		);
	});

	it('finds one wild sample and leaves a ramp alone', () => {
		const ramp = Float64Array.from({ length: 200 }, (_, i) => i);
		expect(hampelSpikes(ramp, 7).some(Boolean)).toBe(false);
		const wild = ramp.map((value, i) => (i === 100 ? 900 : value));
		expect([...hampelSpikes(wild, 7).keys()].filter((i) => hampelSpikes(wild, 7)[i])).toEqual([100]);
	});
});
