import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import * as air from './humid-air';

describe('saturation pressure', () => {
	it('rises with temperature, through the ice point without a step', () => {
		let before = 0;
		for (let t = -100; t <= 100; t += 0.5) {
			expect(air.saturationPressureKpa(t), String(t)).toBeGreaterThan(before);
			before = air.saturationPressureKpa(t);
		}
		expect(air.saturationOverIceKpa(0.01)).toBeCloseTo(air.saturationOverWaterKpa(0.01), 9);
		expect(air.saturationOverIceKpa(-10)).toBeLessThan(air.saturationOverWaterKpa(-10));
	});

	it('lies within 0.1 % of the IAPWS-based table of ASHRAE, below it as its equation does', () => {
		const table = [
			[-20, 103.24],
			[-5, 401.74],
			[5, 872.6],
			[25, 3169.7],
			[50, 12351.3],
			[100, 101418]
		] as const;
		for (const [t, pa] of table) {
			const ratio = (1000 * air.saturationPressureKpa(t)) / pa;
			expect(ratio, String(t)).toBeGreaterThan(0.999);
			expect(ratio, String(t)).toBeLessThan(1);
		}
	});

	it('is unknown outside the range of the regulation', () => {
		for (const t of [-100.1, 100.1, NaN]) expect(air.saturationPressureKpa(t)).toBeNaN();
	});
});

describe('humid air', () => {
	it('refuses a humidity that is none', () => {
		expect(air.vapourPressureKpa(-1, 20)).toBeNaN();
		expect(air.vapourPressureKpa(101, 20)).toBeNaN();
		expect(air.vapourPressureKpa(0, 20)).toBe(0);
		expect(air.vapourPressureKpa(100, 20)).toBe(air.saturationPressureKpa(20));
	});

	it('keeps the mole fraction through a throttle', () => {
		const inside = air.vapourPressureAtKpa(1.4, 50, 100);
		expect(inside).toBeCloseTo(0.7, 12);
		expect(air.waterMoleFraction(inside, 50)).toBeCloseTo(air.waterMoleFraction(1.4, 100), 14);
		expect(air.vapourPressureAtKpa(1, 50, 0)).toBeNaN();
	});

	it('is lighter when moist and follows the gas law when dry', () => {
		expect(air.airDensityKgM3(101.325, 0, 15)).toBeCloseTo(1.225, 4);
		fc.assert(
			fc.property(
				fc.double({ min: 60, max: 300, noNaN: true }),
				fc.double({ min: 0.01, max: 5, noNaN: true }),
				fc.double({ min: -40, max: 150, noNaN: true }),
				(pressure, vapour, t) => {
					expect(air.airDensityKgM3(pressure, vapour, t)).toBeLessThan(air.airDensityKgM3(pressure, 0, t));
					expect(air.airDensityKgM3(2 * pressure, 2 * vapour, t)).toBeCloseTo(
						2 * air.airDensityKgM3(pressure, vapour, t),
						9
					);
				}
			)
		);
		expect(air.airDensityKgM3(100, -1, 20)).toBeNaN();
		expect(air.airDensityKgM3(100, 101, 20)).toBeNaN();
	});

	it('agrees with itself: density of the dry part times 1 + ω is the density of moist air', () => {
		const omega = air.humidityRatio(2, 100);
		const dry = air.airDensityKgM3(98, 0, 30);
		expect((dry * (1 + omega)) / air.airDensityKgM3(100, 2, 30)).toBeCloseTo(1, 5);
	});

	it('takes the water out of a flow and puts it back', () => {
		const omega = air.humidityRatio(1.5, 98);
		expect(omega).toBeCloseTo((0.622 * 1.5) / 96.5, 5);
		expect(air.moistAirFlowKgH(air.dryAirFlowKgH(450, omega), omega)).toBeCloseTo(450, 10);
		expect(air.dryAirFlowKgH(450, omega)).toBeLessThan(450);
		expect(air.humidityRatio(100, 100)).toBeNaN();
		expect(air.humidityRatio(-0.1, 100)).toBeNaN();
		expect(air.waterMoleFraction(1, 0)).toBeNaN();
	});
});
