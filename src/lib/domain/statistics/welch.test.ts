import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { summarise } from './moments';
import { welchDifference } from './welch';

describe('difference of two means', () => {
	it('has the interval of equal groups: t at 2n − 2 degrees of freedom', () => {
		const group = { n: 5, mean: 10, sd: 2 };
		const difference = welchDifference({ ...group, mean: 13 }, group)!;
		expect(difference.value).toBe(3);
		expect(difference.df).toBeCloseTo(8, 12);
		// t(0.975, 8) = 2.306004
		expect(difference.interval[1] - 3).toBeCloseTo(2.306004 * 2 * Math.sqrt(2 / 5), 5);
	});

	it('is that of Student’s sleep data', () => {
		// Hours of sleep gained with two drugs (Student 1908), as R’s documentation of `t.test` works it; quoted from memory.
		const one = summarise([0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0, 2]);
		const other = summarise([1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4]);
		const difference = welchDifference(one, other)!;
		expect(difference.value / difference.standardError).toBeCloseTo(-1.8608, 4);
		expect(difference.df).toBeCloseTo(17.776, 3);
		expect(difference.interval[0]).toBeCloseTo(-3.3654832, 6);
		expect(difference.interval[1]).toBeCloseTo(0.2054832, 6);
	});

	it('is unknown where a group has one value, or nothing scatters', () => {
		const many = { n: 5, mean: 10, sd: 2 };
		expect(welchDifference({ n: 1, mean: 11, sd: null }, many)).toBeNull();
		expect(welchDifference(many, { n: 1, mean: 11, sd: null })).toBeNull();
		expect(welchDifference({ ...many, sd: 0 }, { ...many, sd: 0 })).toBeNull();
	});

	it('turns its sign with the order, and stands between the smaller group’s and all degrees of freedom', () => {
		const values = fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 2, maxLength: 20 });
		fc.assert(
			fc.property(values, values, (a, b) => {
				const [one, other] = [summarise(a), summarise(b)];
				fc.pre(one.sd > 1e-6 && other.sd > 1e-6);
				const [there, back] = [welchDifference(one, other)!, welchDifference(other, one)!];
				expect(there.value).toBeCloseTo(-back.value, 10);
				expect(there.interval[0]).toBeCloseTo(-back.interval[1], 6);
				expect(there.df).toBeGreaterThanOrEqual(Math.min(a.length, b.length) - 1 - 1e-9);
				expect(there.df).toBeLessThanOrEqual(a.length + b.length - 2 + 1e-9);
			})
		);
	});
});
