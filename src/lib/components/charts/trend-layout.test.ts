import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { niceTicks, spreadOf } from './trend-layout';

describe('ticks', () => {
	it.each([
		[[31.2, 34.5], 5, [32, 33, 34]],
		[[0.8665, 0.8722], 4, [0.868, 0.87, 0.872]],
		[[120, 180], 4, [120, 140, 160, 180]]
	])('of %j: about %i', (values, wanted, ticks) => expect(niceTicks(values, wanted).values).toEqual(ticks));
	it('gives one value room on both sides', () => {
		const { low, high } = niceTicks([126.9], 5);
		expect(low).toBeLessThan(126.9);
		expect(high).toBeGreaterThan(126.9);
	});
	it('stands when there is nothing', () => expect(niceTicks([], 5).values).toEqual([0, 1]));
	it('always holds the data between its ends, with ticks inside', () => {
		const value = fc.double({ min: -1e5, max: 1e5, noNaN: true });
		fc.assert(
			fc.property(fc.array(value, { minLength: 1, maxLength: 20 }), (values) => {
				const { low, high, values: ticks } = niceTicks(values, 5);
				for (const each of values) expect(each >= low && each <= high).toBe(true);
				expect(ticks.length).toBeLessThanOrEqual(12);
				for (const tick of ticks) expect(tick >= low - 1e-6 && tick <= high + 1e-6).toBe(true);
			})
		);
	});
});

it('spreads points inside their column, the first in the middle', () => {
	const places = Array.from({ length: 50 }, (_, n) => spreadOf(n));
	expect(places[0]).toBe(0);
	for (const place of places) expect(Math.abs(place)).toBeLessThanOrEqual(0.5);
	expect(new Set(places.map((place) => place.toFixed(4))).size).toBe(50);
});
