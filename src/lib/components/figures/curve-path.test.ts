import { describe, expect, it } from 'vitest';
import { curvePaths, MARK_HEIGHT, MARK_WIDTH } from './curve-path';

const RPM = [2000, 3000, 4000, 5000, 6000];
const CURVE = { speed: RPM, torque: [150, 180, 210, 200, 170], power: [31, 57, 88, 105, 107] };
const points = (path: string) =>
	path
		.split(/[ML]/)
		.filter(Boolean)
		.map((pair) => pair.split(' ').map(Number) as [number, number]);

describe('curve mark', () => {
	it('runs from edge to edge inside its box', () => {
		const all = points(curvePaths(CURVE)?.power ?? '');
		expect(all[0]?.[0]).toBe(2);
		expect(all.at(-1)?.[0]).toBe(MARK_WIDTH - 2);
		for (const [, y] of all) expect(y).toBeGreaterThanOrEqual(2);
		for (const [, y] of all) expect(y).toBeLessThanOrEqual(MARK_HEIGHT - 2);
	});
	it('puts the peak of each line at the top', () => {
		const torque = points(curvePaths(CURVE)?.torque ?? '');
		expect(torque[2]?.[1]).toBe(2);
	});
	it('keeps the peak when it thins a long curve', () => {
		const speed = Array.from({ length: 200 }, (_, n) => 1000 + n * 30);
		const torque = speed.map((_, n) => (n === 101 ? 300 : 200));
		const all = points(curvePaths({ speed, torque, power: torque })?.torque ?? '');
		expect(all.length).toBeLessThan(40);
		expect(Math.min(...all.map(([, y]) => y))).toBe(2);
	});
	it('leaves a gap where a value is missing', () => {
		const gap = curvePaths({ ...CURVE, power: [31, null, 88, 105, 107] })?.power ?? '';
		expect(gap.match(/M/g)).toHaveLength(2);
	});
	it('draws held points as dots, each where it belongs, and joins none of them', () => {
		const held = {
			speed: [2000, 2000.4, 1999.8, 4000],
			torque: [200, 150, 100, 190],
			power: [42, 31, 21, 80]
		};
		const power = curvePaths(held)?.power ?? '';
		expect(power).not.toContain('L');
		expect(power.match(/M[\d.]+ [\d.]+h0/g)).toHaveLength(4);
		expect(power.endsWith(`M${(MARK_WIDTH - 2).toFixed(1)} 2.0h0`)).toBe(true);
	});
	it.each([[null], [undefined], [{ speed: [] }], [{ speed: [3000], torque: [100], power: [31] }]])(
		'is hollow for %j',
		(curve) => expect(curvePaths(curve)).toBeNull()
	);
});
