import { describe, expect, it } from 'vitest';
import type { CellFacts, EngineFacts } from '../model';
import {
	angularAccelerationRadS2,
	deadWeightTorqueNm,
	engineTorqueNm,
	inertiaBeforeSensor,
	throughGearNm
} from './rotation';

const engine = (inertiaKgM2: number | null): EngineFacts => ({
	displacementL: 2,
	cylinders: 4,
	strokesPerCycle: 4,
	ignition: 'spark',
	induction: 'natural',
	inertiaKgM2,
	maxSpeedRpm: null,
	expectedTorque: null
});
const cell = (
	torqueAt: CellFacts['torqueAt'],
	rotorInertiaKgM2: number | null = 0.3,
	shaftInertiaKgM2: number | null = 0.02
): CellFacts => ({ torqueAt, rotorInertiaKgM2, shaftInertiaKgM2 });
/** 400 rev/min per second. */
const RAMP_RAD_S2 = (400 * 2 * Math.PI) / 60;

describe('inertia before the sensor', () => {
	it('is engine and shaft for an in-line flange', () => {
		expect(inertiaBeforeSensor(engine(0.15), cell('flange'))).toEqual({
			inertiaKgM2: 0.16999999999999998,
			counted: ['engine', 'shaft'],
			missing: []
		});
	});
	it('is the rotor too for a load cell on a swinging stator', () => {
		expect(inertiaBeforeSensor(engine(0.15), cell('stator'))?.inertiaKgM2).toBeCloseTo(0.47, 12);
	});
	it('names what it could not count', () => {
		const found = inertiaBeforeSensor(engine(0.15), cell('stator', null, null));
		expect(found).toEqual({ inertiaKgM2: 0.15, counted: ['engine'], missing: ['shaft', 'rotor'] });
	});
	it('counts a rotor behind a gear by its energy: at half the speed a quarter, and the loss on top', () => {
		const geared = { ...cell('stator'), gear: { ratio: 2, efficiency: 0.96 } };
		expect(inertiaBeforeSensor(engine(0.15), geared)?.inertiaKgM2).toBeCloseTo(0.17 + 0.3 / 4 / 0.96, 12);
	});
	it('leaves a gear out where torque is weighed before it', () => {
		const geared = { ...cell('flange'), gear: { ratio: 2, efficiency: 0.96 } };
		expect(inertiaBeforeSensor(engine(0.15), geared)?.inertiaKgM2).toBeCloseTo(0.17, 12);
	});
	it('is unknown without the engine', () => {
		expect(inertiaBeforeSensor(engine(null), cell('flange'))).toBeNull();
	});
});

describe('a gear between engine and absorber', () => {
	const gear = { ratio: 2.5, efficiency: 0.97 };
	it('keeps power but for its loss, whoever drives', () => {
		// 4000 rev/min at the engine are 1600 at the absorber; powers as torque times speed.
		expect((throughGearNm(240, gear) * 4000 * 0.97) / (240 * 1600)).toBeCloseTo(1, 12);
		expect((throughGearNm(-240, gear) * 4000) / (-240 * 1600 * 0.97)).toBeCloseTo(1, 12);
	});
	it('of one to one without loss changes nothing', () =>
		expect(throughGearNm(123.4, { ratio: 1, efficiency: 1 })).toBe(123.4));
});

describe('a dead weight on the arm', () => {
	it('weighs mass, gravity and arm', () =>
		expect(deadWeightTorqueNm(20, 0.5, 9.81832)).toBeCloseTo(98.1832, 10));
});

describe('angular acceleration', () => {
	const time = Float64Array.from({ length: 1000 }, (_, i) => i * 0.01);

	it('finds a steady ramp, at its ends too', () => {
		const found = angularAccelerationRadS2(
			time,
			time.map((t) => 5000 + 400 * t)
		);
		for (const i of [0, 1, 500, 998, 999]) expect(found[i]).toBeCloseTo(RAMP_RAD_S2, 7);
	});

	it('keeps noise of 3 rev/min out of the torque of a ramp', () => {
		// A fixed irrational step makes a spread-out, repeatable noise.
		const noise = (i: number) => 3 * Math.sin(i * i * 0.618);
		const found = angularAccelerationRadS2(
			time,
			time.map((t, i) => 5000 + 400 * t + noise(i))
		);
		const inside = found.subarray(50, 950);
		for (const value of inside) expect(Math.abs(value / RAMP_RAD_S2 - 1)).toBeLessThan(0.05);
	});

	it('follows a changing ramp', () => {
		const found = angularAccelerationRadS2(
			time,
			time.map((t) => 1000 + 20 * t * t),
			0.5
		);
		expect(found[500]).toBeCloseTo((2 * 20 * 5 * 2 * Math.PI) / 60, 7);
	});

	it('works over holes and unknown samples, and says where it cannot', () => {
		const holed = time.map((t, i) => (i % 2 === 0 ? NaN : 5000 + 400 * t));
		expect(angularAccelerationRadS2(time, holed)[500]).toBeCloseTo(RAMP_RAD_S2, 7);
		const slow = [0, 1, 2, 3];
		expect([...angularAccelerationRadS2(slow, slow)]).toEqual([NaN, NaN, NaN, NaN]);
		expect(angularAccelerationRadS2([], [])).toHaveLength(0);
	});

	it('adds what the ramp takes', () => {
		expect(engineTorqueNm(30, 0.02, RAMP_RAD_S2)).toBeCloseTo(30.838, 3);
	});
});
