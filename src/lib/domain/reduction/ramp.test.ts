import { describe, expect, it } from 'vitest';
import { findRamps } from './ramp';

const noise = (i: number) => ((i * 7919) % 1009) / 504.5 - 1;
/** Parts of [seconds, from, to] at 50 Hz, with some rev/min of noise. */
function record(...parts: [seconds: number, from: number, to: number][]) {
	const speeds = parts.flatMap(([seconds, from, to]) =>
		Array.from({ length: seconds * 50 }, (_, k) => from + ((to - from) * k) / (seconds * 50))
	);
	return {
		time: Float64Array.from(speeds, (_, i) => i * 0.02),
		speed: Float64Array.from(speeds, (rpm, i) => rpm + 8 * noise(i))
	};
}
const ramps = (...parts: Parameters<typeof record>) => {
	const { time, speed } = record(...parts);
	return findRamps(time, speed);
};

describe('findRamps', () => {
	it('one ramp is one, from end to end', () => {
		const [ramp, ...rest] = ramps([45, 2000, 7400]);
		expect(rest).toEqual([]);
		expect(ramp).toMatchObject({ direction: 'up', from: 0, to: 2250 });
		expect(ramp!.rateRpmS).toBeCloseTo(120, 0);
		expect(ramp!.speeds[0]).toBeCloseTo(2000, -1);
		expect(ramp!.speeds[1]).toBeCloseTo(7400, -1);
	});
	it('leaves out holds before and after', () => {
		const [ramp] = ramps([8, 2000, 2000], [30, 2000, 7000], [6, 7000, 7000]);
		expect(ramp!.from / 50).toBeGreaterThan(7.7);
		expect(ramp!.from / 50).toBeLessThan(8.5);
		expect(ramp!.to / 50).toBeGreaterThan(37.5);
		expect(ramp!.to / 50).toBeLessThan(38.3);
	});
	it('parts up and down', () =>
		expect(ramps([20, 2000, 6000], [20, 6000, 2000]).map(({ direction }) => direction)).toEqual([
			'up',
			'down'
		]));
	it('is not parted by a small hesitation', () =>
		expect(ramps([15, 2000, 4000], [1, 4000, 3920], [15, 3920, 6000])).toHaveLength(1));
	it('is not parted by a slow ramp’s noise', () => expect(ramps([300, 2000, 3000])).toHaveLength(1));
	it('finds repeats', () =>
		expect(
			ramps([20, 2000, 6000], [5, 6000, 2000], [20, 2000, 6000]).filter(({ direction }) => direction === 'up')
		).toHaveLength(2));
	it('finds none where the speed stands', () => expect(ramps([60, 3000, 3010])).toEqual([]));
	it('finds a ramp of three seconds', () => expect(ramps([3, 2000, 7000])).toHaveLength(1));
	it('takes steps of speed for a ramp', () =>
		expect(
			ramps([5, 2000, 2000], [5, 2500, 2500], [5, 3000, 3000], [5, 3500, 3500], [5, 4000, 4000])
		).toHaveLength(1));
});
