import { describe, expect, it } from 'vitest';
import { localPeak, localValue, seriesOf } from './local-peak';

const speeds = Float64Array.from({ length: 55 }, (_, i) => 2050 + 100 * i);
const even = new Float64Array(55).fill(40);
const range = [2000, 7500] as const;
const over = (y: (n: number) => number) => seriesOf(speeds, Float64Array.from(speeds, y), even);
/** Small scatter without a random source. */
const scatter = (n: number) => 0.6 * (((((Math.sin(n) * 43758.5453) % 1) + 1) % 1) - 0.5);

describe('localPeak', () => {
	it('finds a maximum between bins', () => {
		const peak = localPeak(
			over((n) => 200 - 1e-5 * (n - 4987) ** 2),
			range
		)!;
		expect(peak.x).toBeCloseTo(4987, -1);
		expect(peak.value).toBeCloseTo(200, 4);
	});
	it('finds a minimum', () => {
		const low = localPeak(
			over((n) => 240 + 2e-6 * (n - 4321) ** 2),
			range,
			-1
		)!;
		expect(low.x).toBeCloseTo(4321, -1);
		expect(low.value).toBeCloseTo(240, 4);
	});
	it('goes to the end of the measured speeds, and not beyond', () => {
		const end = localPeak(
			over((n) => 0.01 * n),
			[2010, 7490]
		)!;
		expect(end.x).toBe(7490);
		expect(end.value).toBeCloseTo(74.9, 6);
		expect(
			localPeak(
				over((n) => 0.01 * n),
				[2010, 7460]
			)!.x
		).toBe(7460);
	});
	it('does not go more than a bin beyond the bins, whatever the range says', () =>
		expect(
			localPeak(
				over((n) => 0.01 * n),
				[0, 20_000]
			)!.x
		).toBeCloseTo(7550, 6));
	it('is not taken in by scatter: the highest bin reads too high', () => {
		const noisy = over((n) => 200 - 1e-5 * (n - 4987) ** 2 + scatter(n));
		const peak = localPeak(noisy, range)!;
		expect(Math.abs(peak.value - 200)).toBeLessThan(0.1);
		expect(Math.max(...noisy.y) - 200).toBeGreaterThan(0.1);
		expect(peak.u).toBeGreaterThan(0.01);
		expect(peak.u).toBeLessThan(0.1);
	});
	it('follows a curve with detail where the scatter allows', () => {
		const peak = localPeak(
			over((n) => 200 - 20 * Math.tanh(((n - 5000) / 800) ** 2)),
			range
		)!;
		expect(Math.abs(peak.value - 200)).toBeLessThan(0.8);
	});
	it('passes over bins where a channel is unknown', () => {
		const gaps = over((n) => (n > 5000 && n < 5300 ? NaN : 200 - 1e-5 * (n - 5100) ** 2));
		expect(localPeak(gaps, range)!.value).toBeCloseTo(200, 3);
	});
	it.each([1, 2, 3])('of %d bins takes the best bin', (count) => {
		const few = seriesOf(
			speeds.subarray(0, count),
			Float64Array.of(5, 7, 6).subarray(0, count),
			even.subarray(0, count)
		);
		expect(localPeak(few, range)).toEqual({
			x: speeds[Math.min(count, 2) - 1],
			value: [5, 7, 7][count - 1],
			u: null
		});
	});
	it('is null without a curve', () =>
		expect(
			localPeak(
				over(() => NaN),
				range
			)
		).toBeNull());
});

describe('localValue', () => {
	it('is the curve’s value at a speed', () =>
		expect(
			localValue(
				over((n) => 1e-5 * n * n),
				4444
			)!.value
		).toBeCloseTo(1e-5 * 4444 ** 2, 6));
	it('weighs bins by their samples', () => {
		const y = Float64Array.from(speeds, () => 10);
		y[54] = 20;
		const light = even.slice();
		light[54] = 0.01;
		expect(localValue(seriesOf(speeds, y, light), 7450)!.value).toBeLessThan(10.5);
	});
});
