import { describe, expect, it } from 'vitest';
import { accelerationOf } from './inertia';

describe('accelerationOf', () => {
	it.each([10, 50, 200, 1000])('is the slope of a ramp at %d Hz, noise and all', (rate) => {
		const time = Float64Array.from({ length: 10 * rate }, (_, i) => i / rate);
		const speed = Float64Array.from(time, (t, i) => 2000 + 400 * t + 2 * (((i * 7919) % 1009) / 504.5 - 1));
		const acceleration = accelerationOf(time, speed);
		const expected = (400 * 2 * Math.PI) / 60;
		for (let i = rate; i < 9 * rate; i++)
			expect(Math.abs(acceleration[i]! / expected - 1)).toBeLessThan(0.05);
	});
	it('follows the bend of a ramp that grows steeper', () => {
		const time = Float64Array.from({ length: 500 }, (_, i) => i / 100);
		const speed = Float64Array.from(time, (t) => 2000 + 100 * t * t);
		const acceleration = accelerationOf(time, speed);
		expect(acceleration[250]).toBeCloseTo((200 * 2.5 * 2 * Math.PI) / 60, 1);
	});
});
