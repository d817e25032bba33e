import { describe, expect, it } from 'vitest';
import { envelopePath } from './envelope-path';

const machine = { kind: 'ac', maxPowerKw: 100, maxTorqueNm: 200, maxSpeedRpm: 10_000, envelope: null };
const points = (line: string) =>
	line
		.slice(1)
		.split('L')
		.map((pair) => pair.split(' ').map(Number));

describe('the envelope drawn', () => {
	it('is the machine’s torque up to its corner, then its power', () => {
		const { line, topTorqueNm } = envelopePath(machine, 100, 50);
		expect(topTorqueNm).toBe(200);
		expect(points(line)[0]).toEqual([0, 0]);
		// 100 kW at 10 000 rev/min is 95.5 N·m.
		expect(points(line).at(-1)?.[1]).toBeCloseTo(50 - (95.493 / 200) * 50, 1);
	});
	it('keeps the corners of a recorded one', () => {
		const envelope: [number, number][] = [
			[1013, 40],
			[3777, 180],
			[10_000, 60]
		];
		const drawn = points(envelopePath({ ...machine, envelope }, 1000, 180).line);
		expect(drawn).toContainEqual([377.7, 0]);
		expect(drawn.at(-1)).toEqual([1000, 120]);
	});
	it('closes its area on the speed axis', () =>
		expect(envelopePath(machine, 100, 50).area.endsWith('V50H0Z')).toBe(true));
});
