import { describe, expect, it } from 'vitest';
import { delayed } from './delay';

const time = Float64Array.from({ length: 11 }, (_, i) => i * 0.1);

describe('delayed', () => {
	it('moves whole steps without touching the values', () => {
		const values = Float64Array.of(0, 0, 0, 5, 0, 0, 0, 0, 0, 0, 9);
		const moved = delayed(time, values, 0.2);
		expect(moved[1]).toBe(5);
		expect(moved[8]).toBe(9);
		expect(moved[9]).toBeNaN();
	});
	it('takes the straight line between samples for part of a step', () => {
		const ramp = Float64Array.from(time, (t) => 10 * t);
		const moved = delayed(time, ramp, 0.25);
		for (let i = 0; i <= 7; i++) expect(moved[i]).toBeCloseTo(10 * (time[i]! + 0.25), 9);
	});
	it('keeps a sparse channel sparse', () => {
		const sparse = Float64Array.from(time, (_, i) => (i % 5 === 0 ? i : NaN));
		const moved = delayed(time, sparse, 0.1);
		expect(Array.from(moved.keys()).filter((i) => !Number.isNaN(moved[i]!))).toEqual([4, 9]);
		expect([moved[4], moved[9]]).toEqual([5, 10]);
	});
	it('a negative delay moves the other way', () => {
		const values = Float64Array.from(time, (_, i) => i);
		expect(delayed(time, values, -0.3)[5]).toBeCloseTo(2, 9);
	});
});
