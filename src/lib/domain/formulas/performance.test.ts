import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { volumetricEfficiency, theoreticalAirFlowKgH } from './breathing';
import { combinedPowerKw, electricalEnergy, storeLastsS } from './electrical';
import { integrate, massKg, workMj } from './integral';
import * as perf from './performance';

const positive = fc.double({ min: 0.01, max: 1e4, noNaN: true });

describe('performance', () => {
	it('counts revolutions per cycle', () => {
		expect(perf.revolutionsPerCycle(4)).toBe(2);
		expect(perf.revolutionsPerCycle(2)).toBe(1);
	});

	it('turns torque into power and back', () => {
		fc.assert(
			fc.property(positive, positive, (speed, torque) => {
				expect(perf.torqueFromPowerNm(perf.brakePowerKw(speed, torque), speed) / torque).toBeCloseTo(1, 12);
			})
		);
		expect(perf.torqueFromPowerNm(10, 0)).toBeNaN();
	});

	it('makes a two-stroke of the same torque half the mean pressure', () => {
		expect(perf.bmepKpa(150, 2, 1)).toBeCloseTo(perf.bmepKpa(150, 2, 2) / 2, 12);
		expect(perf.bmepKpa(150, 0, 2)).toBeNaN();
	});

	it('binds efficiency and specific consumption by 3600/LHV', () => {
		fc.assert(
			fc.property(positive, positive, fc.double({ min: 10, max: 130, noNaN: true }), (power, fuel, lhv) => {
				const product = perf.brakeThermalEfficiency(power, fuel, lhv) * perf.bsfcGKwh(fuel, power) * lhv;
				expect(product / 3600).toBeCloseTo(1, 12);
			})
		);
		expect(perf.fuelEnergyFlowMjH(10, 42) / perf.fuelPowerKw(10, 42)).toBeCloseTo(3.6, 14);
	});

	it('has no figure where it has no meaning', () => {
		expect(perf.bsfcGKwh(1, 0)).toBeNaN();
		expect(perf.bsfcGKwh(1, -5)).toBeNaN();
		expect(perf.brakeThermalEfficiency(50, 0, 42)).toBeNaN();
		expect(perf.airFuelRatio(100, 0)).toBeNaN();
		expect(perf.airFuelRatio(100, -0.2)).toBeNaN();
		expect(perf.lambdaFromAfr(14, 0)).toBeNaN();
		expect(perf.brakePowerKw(NaN, 100)).toBeNaN();
		expect(perf.brakeThermalEfficiency(-5, 2, 42)).toBeLessThan(0);
	});

	it('knows the displacement from bore and stroke', () => {
		expect(perf.displacementL(86, 86, 4)).toBeCloseTo(1.998, 3);
	});
});

describe('breathing', () => {
	it('is one where the flow is the theoretical one', () => {
		fc.assert(
			fc.property(positive, positive, positive, (density, litres, speed) => {
				const flow = theoreticalAirFlowKgH(density, litres, speed, 2);
				expect(volumetricEfficiency(flow, density, litres, speed, 2)).toBeCloseTo(1, 12);
				expect(theoreticalAirFlowKgH(density, litres, speed, 1) / flow).toBeCloseTo(2, 12);
			})
		);
		expect(volumetricEfficiency(100, 1.2, 2, 0, 2)).toBeNaN();
	});
});

describe('integrals', () => {
	it('integrates a straight line exactly on uneven steps', () => {
		const time = [0, 0.5, 2, 2.1, 4];
		expect(integrate(time, time).total).toBeCloseTo(8, 12);
		expect(workMj([0, 10], [100, 100])).toBeCloseTo(1, 12);
		expect(massKg([0, 1800, 3600], [10, 10, 10])).toBeCloseTo(10, 12);
	});

	it('counts nothing over a hole, an unknown sample or a step back, and says how much', () => {
		expect(integrate([0, 1, 11, 12], [5, 5, 5, 5], 2)).toEqual({ total: 10, coveredS: 2, leftOutS: 10 });
		expect(integrate([0, 1, 2], [5, NaN, 5])).toEqual({ total: 0, coveredS: 0, leftOutS: 2 });
		expect(integrate([0, 1, 0.5, 2], [1, 1, 1, 1]).total).toBeCloseTo(2.5, 12);
		expect(integrate([0], [1])).toEqual({ total: 0, coveredS: 0, leftOutS: 0 });
	});
});

describe('electrical energy', () => {
	it('keeps out and in apart where the sign changes inside a step', () => {
		const found = electricalEnergy([0, 2], [100, -100]);
		expect(found.outMj).toBeCloseTo(0.05, 12);
		expect(found.inMj).toBeCloseTo(0.05, 12);
		expect(found.netMj[1]).toBeCloseTo(0, 12);
		expect(found.swingMj).toBeCloseTo(0.05, 12);
		expect(found.maxKw).toBe(100);
	});

	it('swings by what is drawn before it is given back', () => {
		const time = Float64Array.from({ length: 301 }, (_, i) => i * 0.1);
		const found = electricalEnergy(
			time,
			time.map((t) => (t < 10 ? 90 : -45))
		);
		// The turn-over from 90 to -45 kW takes the step before 10 s, two thirds of it above zero.
		expect(found.outMj).toBeCloseTo(0.891 + 0.003, 12);
		expect(found.inMj).toBeCloseTo(0.9 + 0.00075, 12);
		expect(found.swingMj).toBeCloseTo(0.9 + 0.00075, 12);
	});

	it('balances: net is out less in', () => {
		fc.assert(
			fc.property(fc.array(fc.double({ min: -200, max: 200, noNaN: true }), { minLength: 2 }), (power) => {
				const found = electricalEnergy(
					power.map((_, i) => i * 0.05),
					power
				);
				expect(found.netMj.at(-1)).toBeCloseTo(found.outMj - found.inMj, 9);
				expect(found.swingMj).toBeGreaterThanOrEqual(Math.abs(found.netMj.at(-1)!) - 1e-12);
				expect(Math.min(found.outMj, found.inMj)).toBeGreaterThanOrEqual(0);
			})
		);
	});

	it('counts nothing at an unknown sample or over a hole', () => {
		expect(electricalEnergy([0, 1, 2], [10, NaN, 10])).toMatchObject({
			outMj: 0,
			inMj: 0,
			swingMj: 0,
			maxKw: 10
		});
		expect(electricalEnergy([0, 60], [10, 10], 1).outMj).toBe(0);
		expect(electricalEnergy([], []).maxKw).toBeNaN();
	});

	it('adds the machine only where its torque is not measured already', () => {
		expect(combinedPowerKw(75, 90, false)).toBe(165);
		expect(combinedPowerKw(75, 90, true)).toBe(75);
		expect(storeLastsS(3.6, 60)).toBeCloseTo(60, 12);
		expect(storeLastsS(3.6, 0)).toBeNaN();
	});
});
