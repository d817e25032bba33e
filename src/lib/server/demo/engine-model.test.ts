import { describe, expect, it } from 'vitest';
import { lineAt, workingPoint, type Surroundings } from './engine-model';
import { DEMO_ENGINES, modelOf } from './lab/engines';
import { seededRandom } from './random';

const air: Surroundings = { barometerKpa: 99.5, temperatureC: 22, humidityPct: 45 };
const petrol = { lhvMjKg: 42.4, afrStoich: 14.3 };
const models = DEMO_ENGINES.flatMap((engine) =>
	engine.builds.map(({ number }) => ({
		number,
		expectedTorque: engine.expectedTorque,
		model: modelOf(engine, number)
	}))
);

describe.each(models)('the model of $number', ({ expectedTorque, model }) => {
	const from = expectedTorque[0]![0];
	const speeds = Array.from({ length: 40 }, (_, k) => from + (k * (model.maxSpeedRpm - from)) / 39);

	it('never gives more power than half of its fuel power, and never less than none at half load and above', () => {
		for (const speedRpm of speeds)
			for (const load of [0.5, 0.75, 1]) {
				const point = workingPoint(model, air, petrol, { speedRpm, load });
				const fuelKw = (point.fuelFlowKgH * petrol.lhvMjKg) / 3.6;
				expect(point.powerKw).toBeGreaterThan(0);
				expect(point.powerKw).toBeLessThanOrEqual(0.5 * fuelKw);
			}
	});

	it('has figures that hold together', () => {
		for (const speedRpm of speeds) {
			const point = workingPoint(model, air, petrol, { speedRpm, load: 1 });
			expect(point.powerKw).toBeCloseTo((2 * Math.PI * speedRpm * point.torqueNm) / 60_000, 9);
			expect(point.lambda).toBeCloseTo(point.airFlowKgH / point.fuelFlowKgH / petrol.afrStoich, 9);
			expect(point.bte).toBeCloseTo((3.6 * point.powerKw) / (point.fuelFlowKgH * petrol.lhvMjKg), 9);
		}
	});

	it('is as efficient as an engine of its kind', () => {
		const best = Math.max(
			...speeds.map((speedRpm) => workingPoint(model, air, petrol, { speedRpm, load: 1 }).bte)
		);
		const [lo, hi] =
			model.ignition === 'compression'
				? [0.38, 0.43]
				: model.strokesPerCycle === 2
					? [0.22, 0.27]
					: [0.3, 0.37];
		expect(best).toBeGreaterThan(lo);
		expect(best).toBeLessThan(hi);
	});

	it('gives about the torque that is expected of it', () => {
		for (const speedRpm of speeds) {
			const { torqueNm } = workingPoint(model, air, petrol, { speedRpm, load: 1 });
			expect(Math.abs(torqueNm / lineAt(expectedTorque, speedRpm) - 1)).toBeLessThan(0.15);
		}
	});

	it('gives less where the air is thinner', () => {
		const at = (surroundings: Surroundings) =>
			workingPoint(model, surroundings, petrol, { speedRpm: speeds[20]!, load: 1 }).powerKw;
		expect(at({ ...air, barometerKpa: 95 })).toBeLessThan(at(air));
		expect(at({ ...air, temperatureC: 35 })).toBeLessThan(at(air));
		expect(at({ ...air, humidityPct: 95 })).toBeLessThan(at(air));
	});
});

describe('a fuel cap', () => {
	const model = modelOf(
		DEMO_ENGINES.find(({ code }) => code === 'TS-14')!,
		'TS-14.1'
	);

	it('makes a spark engine lean and weaker, not less than it burns', () => {
		const free = workingPoint(model, air, petrol, { speedRpm: 5000, load: 1 });
		const fuelCapKgH = 0.9 * free.fuelFlowKgH;
		const capped = workingPoint(model, air, petrol, { speedRpm: 5000, load: 1, fuelCapKgH });
		expect(capped.fuelFlowKgH).toBe(fuelCapKgH);
		expect(capped.lambda).toBeCloseTo(free.lambda / 0.9, 9);
		expect(capped.torqueNm).toBeLessThan(free.torqueNm);
	});
});

describe('lines over speed', () => {
	const line = [
		[1000, 1],
		[2000, 3],
		[3000, 3.5],
		[4000, 2]
	] as const;

	it('go through their points, hold their ends and never overshoot', () => {
		for (const [rpm, value] of line) expect(lineAt(line, rpm)).toBeCloseTo(value, 12);
		expect(lineAt(line, 0)).toBe(1);
		expect(lineAt(line, 9000)).toBe(2);
		for (let rpm = 1000; rpm <= 4000; rpm += 7) {
			expect(lineAt(line, rpm)).toBeGreaterThanOrEqual(1);
			expect(lineAt(line, rpm)).toBeLessThanOrEqual(3.5);
		}
	});
});

describe('seeded numbers', () => {
	it('are the same for the same seed, others for another', () => {
		const draw = (seed: string) => {
			const random = seededRandom(seed);
			return Array.from({ length: 20 }, () => random.normal());
		};
		expect(draw('a')).toEqual(draw('a'));
		expect(draw('a')).not.toEqual(draw('b'));
	});

	it('are normal of mean 0 and deviation 1, and even over 0 to 1', () => {
		const random = seededRandom('moments');
		const normal = Array.from({ length: 40_000 }, () => random.normal());
		const mean = normal.reduce((sum, value) => sum + value, 0) / normal.length;
		const variance = normal.reduce((sum, value) => sum + (value - mean) ** 2, 0) / normal.length;
		// Five standard errors.
		expect(Math.abs(mean)).toBeLessThan(5 / Math.sqrt(normal.length));
		expect(Math.abs(variance - 1)).toBeLessThan(5 * Math.sqrt(2 / normal.length));
		const even = Array.from({ length: 40_000 }, () => random.even());
		expect(Math.min(...even)).toBeGreaterThanOrEqual(0);
		expect(Math.max(...even)).toBeLessThan(1);
		expect(Math.abs(even.reduce((sum, value) => sum + value, 0) / even.length - 0.5)).toBeLessThan(0.01);
	});
});
