import { describe, expect, it } from 'vitest';
import { findPlateaus } from './plateaus';

const noise = (i: number) => ((i * 7919) % 1009) / 504.5 - 1;
const settings = { speedTolerance: 0.01, torqueTolerance: 0.02, settleS: 10, averageS: 30 };

/** Parts of [seconds, speed, torque from, torque to] at 10 Hz. */
function plateausOf(
	parts: [seconds: number, rpm: number, from: number, to: number][],
	changes: Partial<typeof settings> = {}
) {
	const rows = parts.flatMap(([seconds, rpm, from, to]) =>
		Array.from({ length: seconds * 10 }, (_, k) => [rpm, from + ((to - from) * k) / (seconds * 10)] as const)
	);
	const time = Float64Array.from(rows, (_, i) => i / 10);
	const speed = Float64Array.from(rows, ([rpm], i) => rpm + 4 * noise(i));
	const torque = Float64Array.from(rows, ([, nm], i) => nm + 1.5 * noise(i + 5));
	return findPlateaus(time, speed, torque, { ...settings, ...changes }).map(({ from, to }) => [
		time[from]!,
		time[to - 1]!
	]);
}

describe('findPlateaus', () => {
	it('leaves out the settling time and the transitions', () => {
		const found = plateausOf([
			[60, 1500, 300, 300],
			[10, 1500, 300, 200],
			[60, 1500, 200, 200]
		]);
		expect(found).toHaveLength(2);
		expect(found[0]![0]).toBeCloseTo(10, 0);
		expect(found[0]![1]).toBeGreaterThan(58);
		expect(found[0]![1]).toBeLessThan(60.5);
		expect(found[1]![0]).toBeGreaterThanOrEqual(79);
		expect(found[1]![0]).toBeLessThan(81.5);
	});
	it('wants the settling time and the averaging time', () => {
		expect(plateausOf([[39, 1500, 300, 300]])).toHaveLength(0);
		expect(plateausOf([[41, 1500, 300, 300]])).toHaveLength(1);
		expect(plateausOf([[20, 1500, 300, 300]], { settleS: 5, averageS: 10 })).toHaveLength(1);
	});
	it('does not take a slow drift for a plateau without end', () => {
		// 30 % over 300 s: never out of tolerance within 10 s.
		const found = plateausOf([[300, 1500, 300, 210]], { averageS: 30 });
		for (const [from, to] of found) expect(to! - from!).toBeLessThan(45);
	});
	it('judges a low torque by the run’s highest, so that idle can be a point', () =>
		expect(
			plateausOf([
				[60, 900, 3, 3],
				[10, 900, 3, 300],
				[60, 1500, 300, 300]
			])
		).toHaveLength(2));
	it('parts points of one torque and two speeds, and steps without a transition', () =>
		expect(
			plateausOf([
				[50, 1500, 300, 300],
				[50, 1550, 300, 300],
				[50, 1550, 280, 280]
			])
		).toHaveLength(3));
	it('finds none in a ramp', () => expect(plateausOf([[100, 1500, 100, 400]])).toEqual([]));
});
