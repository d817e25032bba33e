import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { nearest, niceTicks, placePoints, shownValues, spreadOf, timeTicks } from './trend-layout';

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

describe('ticks of time', () => {
	const ticks = (from: string, to: string, most: number) =>
		timeTicks(Date.parse(from), Date.parse(to), most, 'Europe/Stockholm');
	it('are midnights of the lab’s clock', () =>
		expect(ticks('2026-03-27T12:00:00Z', '2026-03-30T12:00:00Z', 6)).toEqual([
			{ at: Date.parse('2026-03-27T23:00:00Z'), day: '2026-03-28' },
			{ at: Date.parse('2026-03-28T23:00:00Z'), day: '2026-03-29' },
			{ at: Date.parse('2026-03-29T22:00:00Z'), day: '2026-03-30' }
		]));
	it('are months over a year, and never more than there is room for', () => {
		const year = ticks('2025-12-01T12:00:00Z', '2026-12-01T12:00:00Z', 8);
		expect(year.map(({ day }) => day)).toEqual([
			'2026-01-01',
			'2026-03-01',
			'2026-05-01',
			'2026-07-01',
			'2026-09-01',
			'2026-11-01'
		]);
		expect(ticks('1990-01-01T00:00:00Z', '2026-01-01T00:00:00Z', 5).length).toBeLessThanOrEqual(5);
	});
});

it('keeps a wide interval of two runs from pressing the runs into a line', () => {
	const points = [10, 12].map((value) => ({ run: 'r', group: 'a', at: '', value, u: null }));
	const values = shownValues(points, [{ key: 'a', n: 2, mean: 11, ci95: [-100, 122] }]);
	expect([Math.min(...values), Math.max(...values)]).toEqual([9, 13]);
});

it('finds the point under a pointer, the last drawn of two, and none far off', () => {
	const places = [
		{ cx: 10, cy: 10 },
		{ cx: 10, cy: 10 },
		{ cx: 40, cy: 10 }
	];
	expect(nearest(places, 12, 11, 14)).toBe(1);
	expect(nearest(places, 25, 30, 14)).toBe(-1);
});

it('goes through runs over time, or group by group', () => {
	const groups = ['a', 'b'].map((key) => ({ key, n: 2, mean: 0, ci95: null }));
	const points = ['b', 'a', 'b'].map((group, n) => ({
		run: `r${n}`,
		group,
		at: `2026-01-0${n + 1}`,
		value: 0,
		u: null
	}));
	const order = (isTime: boolean) => placePoints(points, groups, isTime).map(({ run }) => run);
	expect(order(true)).toEqual(['r0', 'r1', 'r2']);
	expect(order(false)).toEqual(['r1', 'r0', 'r2']);
});
