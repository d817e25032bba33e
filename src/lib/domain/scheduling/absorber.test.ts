import { describe, expect, it } from 'vitest';
import { absorbableTorqueNm, absorberRemarks, type AbsorberFacts } from './absorber';

const brake: AbsorberFacts = {
	kind: 'eddy_current',
	maxPowerKw: 150,
	maxTorqueNm: 400,
	maxSpeedRpm: 8000,
	envelope: null
};
const codes = (...args: Parameters<typeof absorberRemarks>) => absorberRemarks(...args).map((r) => r.code);
const engine = (expectedTorque: [number, number][] | null, maxSpeedRpm: number | null = 6000) => ({
	expectedTorque,
	maxSpeedRpm
});

describe('what a machine can hold', () => {
	it('is its torque up to the corner, and its power after it', () => {
		// 150 kW at 400 N·m is 3581 rev/min.
		expect(absorbableTorqueNm(brake, 3500)).toBe(400);
		expect(absorbableTorqueNm(brake, 6000)).toBeCloseTo(238.73, 2);
		expect(absorbableTorqueNm(brake, 8001)).toBe(0);
	});

	it('is the recorded envelope where there is one', () => {
		const recorded: AbsorberFacts = {
			...brake,
			envelope: [
				[1000, 300],
				[3000, 400],
				[7000, 200]
			]
		};
		expect([500, 2000, 5000, 7000, 7500].map((rpm) => absorbableTorqueNm(recorded, rpm))).toEqual([
			300, 350, 300, 200, 0
		]);
	});
});

describe('whether an engine fits', () => {
	it('says nothing where it does', () => {
		const line: [number, number][] = [
			[1000, 200],
			[6000, 230]
		];
		expect(absorberRemarks(brake, engine(line), 'power_sweep')).toEqual([]);
	});

	it('names the torque and the speed where it is furthest out', () => {
		const [remark] = absorberRemarks(
			brake,
			engine([
				[1000, 300],
				[2000, 450],
				[6000, 200]
			]),
			null
		);
		expect(remark).toMatchObject({ code: 'torque' });
		expect(remark!.message).toContain('450 N·m at 2000 rev/min');
		expect(remark!.message).toContain('400 N·m there');
	});

	it('finds an excess between the points of both lines', () => {
		// At both ends the line lies under the hyperbola of constant power, and above it between them.
		const line: [number, number][] = [
			[3600, 396],
			[7800, 182]
		];
		expect(codes(brake, engine(line, 7800), null)).toEqual(['torque']);
	});

	it('sees a top speed beyond the machine, from the engine or from its torque line', () => {
		expect(codes(brake, engine([[1000, 10]], 9000), null)).toEqual(['speed']);
		expect(
			codes(
				brake,
				engine([
					[1000, 10],
					[8500, 10]
				]),
				null
			)
		).toEqual(['speed']);
	});

	it('never takes the unknown for a fit', () => {
		const [remark] = absorberRemarks(brake, engine(null, null), 'power_sweep');
		expect(remark).toMatchObject({ code: 'unknown' });
		expect(remark!.message).toContain('top speed and expected torque are not recorded');
	});

	it('lets only a machine that drives motor an engine, and asks no torque of it', () => {
		expect(codes(brake, engine(null), 'motoring')).toEqual(['cannot_drive']);
		expect(codes({ ...brake, kind: 'ac' }, engine([[1000, 900]]), 'motoring')).toEqual([]);
	});

	it('meets the machine through its gear: slower by the ratio, with torque and power to match', () => {
		// Half the speed at the brake, 400 N·m there: 200 N·m and 16 000 rev/min at the engine, its 4 % of loss on top.
		const geared = { ...brake, gear: { ratio: 2, efficiency: 0.96 } };
		const at = (torqueNm: number) =>
			codes(
				geared,
				engine(
					[
						[1000, torqueNm],
						[7000, torqueNm]
					],
					16_000
				),
				'power_sweep'
			);
		expect(at(208)).toEqual([]);
		expect(at(209)).toEqual(['torque']);
		const [remark] = absorberRemarks(geared, engine([[1000, 100]], 16_001), null);
		expect(remark!.message).toContain('the machine 16000 rev/min through its gear at most');
	});
});
