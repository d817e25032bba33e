import {
	workingPoint,
	type ModelEngine,
	type ModelFuel,
	type Surroundings,
	type WorkingPoint
} from './engine-model';
import { ease } from './ease';
import type { Random } from './random';

/** What the test bed asks of the engine at an instant. */
export interface Instant {
	speedRpm: number;
	/** Rate of the speed, rev/min per s. */
	rateRpmS: number;
	/** 1 = full load. */
	load: number;
	fuelCapKgH?: number;
	/** From the store to the machine, kW. */
	electricalKw?: number;
}

export interface Profile {
	durationS: number;
	at(timeS: number): Instant;
}

/** An engine on a test bed on a day. */
export interface Bench {
	engine: ModelEngine;
	air: Surroundings;
	fuel: ModelFuel;
	/** What must be sped up before the torque sensor sees it, kg·m². */
	inertiaKgM2: number;
	/** Full scale of the torque sensor, N·m. */
	torqueRangeNm: number;
	/** What the torque chain shows over what is there; 1 where it is right. */
	torqueReads?: number;
	/** Energy of the electrical store when full, MJ. */
	storeMj?: number;
}

/** Something that goes wrong on one channel for a while: eased in and out, in the channel's own unit. */
export interface Disturbance {
	channel: (typeof CHANNELS)[number];
	atS: number;
	lastsS: number;
	by: number;
}

/** Channels by their canonical codes, in the units the laboratory keeps (kPa absolute, °C, kg/h, N·m). */
export type Recording = Map<string, Float64Array>;

/** Standard deviations of the sensors: shares of full scale or of reading, or the channel's own unit. */
const NOISE = {
	speedRpm: 1.5,
	torqueShareOfRange: 0.0012,
	flowShare: 0.004,
	lambda: 0.002,
	pressureKpa: 0.12,
	oilKpa: 1.5,
	temperatureC: 0.12,
	exhaustC: 1.5,
	electricalKw: 0.03
} as const;

/** How long a disturbance takes to come and to go, s. */
const EDGE_S = 0.3;

/** Thermal time constants, s. */
const SETTLING_S = { coolant: 30, oil: 80, exhaust: 1.2 } as const;

const CHANNELS = [
	'time',
	'speed',
	'torque',
	'throttle',
	'fuel_flow',
	'air_flow',
	'lambda_sensor',
	'manifold_pressure',
	'manifold_temp',
	'inlet_temp',
	'coolant_temp',
	'oil_temp',
	'oil_pressure',
	'exhaust_temp.1',
	'exhaust_temp.2',
	'barometer',
	'ambient_temp',
	'humidity',
	'electrical_power',
	'battery_voltage',
	'battery_current',
	'state_of_charge'
] as const;

/**
 * The same engine on another day: filling and combustion differ by a fifth of a percent, which makes the scatter between runs
 * of one build.
 */
export function asInstalled(engine: ModelEngine, random: Random): ModelEngine {
	const [air, burn] = [1 + 0.002 * random.normal(), 1 + 0.0022 * random.normal()];
	const { breathing, combustion } = engine;
	return {
		...engine,
		breathing: {
			...breathing,
			best: breathing.best * air,
			fall: breathing.fall * air,
			tuned: breathing.tuned.map((bump) => ({ ...bump, gain: bump.gain * air }))
		},
		combustion: { ...combustion, quality: combustion.quality * burn }
	};
}

export const pointAt = (bench: Bench, instant: Instant): WorkingPoint =>
	workingPoint(bench.engine, bench.air, bench.fuel, {
		speedRpm: instant.speedRpm,
		load: instant.load,
		...(instant.fuelCapKgH === undefined ? {} : { fuelCapKgH: instant.fuelCapKgH })
	});

/** Records a profile with all sensors, noise included. */
export function record(
	bench: Bench,
	profile: Profile,
	rateHz: number,
	random: Random,
	disturbances: readonly Disturbance[] = []
): Recording {
	const count = Math.round(profile.durationS * rateHz) + 1;
	const recording: Recording = new Map(CHANNELS.map((code) => [code, new Float64Array(count)]));
	const thermal = new Thermal(pointAt(bench, profile.at(0)), bench.engine, 1 / rateHz);
	const store = new Store(bench.storeMj ?? 1, 1 / rateHz);
	for (let i = 0; i < count; i++) {
		const timeS = i / rateHz;
		const instant = profile.at(timeS);
		const point = pointAt(bench, instant);
		const sample: Record<(typeof CHANNELS)[number], number> = {
			time: timeS,
			...driven(bench, instant, point, random),
			...breathed(bench, point, random),
			...thermal.step(point, random),
			...store.step(instant.electricalKw ?? 0, random)
		};
		for (const { channel, atS, lastsS, by } of disturbances)
			sample[channel] +=
				by * (ease(atS, atS + EDGE_S, timeS) - ease(atS + lastsS, atS + lastsS + EDGE_S, timeS));
		for (const code of CHANNELS) recording.get(code)![i] = sample[code];
	}
	return recording;
}

function driven(bench: Bench, instant: Instant, point: WorkingPoint, random: Random) {
	const accelerationRadS2 = (instant.rateRpmS * 2 * Math.PI) / 60;
	const flow = (value: number) => value * (1 + NOISE.flowShare * random.normal());
	return {
		speed: instant.speedRpm + NOISE.speedRpm * random.normal(),
		// The sensor sees what is left after the rotating parts before it have been sped up.
		torque:
			(bench.torqueReads ?? 1) * (point.torqueNm - bench.inertiaKgM2 * accelerationRadS2) +
			NOISE.torqueShareOfRange * bench.torqueRangeNm * random.normal(),
		throttle: 100 * instant.load ** 1.5 - 0.3 + 0.05 * random.normal(),
		fuel_flow: flow(point.fuelFlowKgH),
		air_flow: flow(point.airFlowKgH),
		lambda_sensor: point.lambda + NOISE.lambda * random.normal(),
		oil_pressure: point.oilKpa + NOISE.oilKpa * random.normal()
	};
}

function breathed({ air }: Bench, point: WorkingPoint, random: Random) {
	const degrees = (value: number) => value + NOISE.temperatureC * random.normal();
	return {
		manifold_pressure: point.manifoldKpa + NOISE.pressureKpa * random.normal(),
		manifold_temp: degrees(point.manifoldC),
		inlet_temp: degrees(air.temperatureC),
		barometer: air.barometerKpa + 0.01 * random.normal(),
		ambient_temp: degrees(air.temperatureC),
		humidity: air.humidityPct + 0.2 * random.normal()
	};
}

/** What follows the load slowly: first-order lags towards where the load would bring it. */
class Thermal {
	private coolantC = 84;
	private oilC = 92;
	private exhaustC: number;

	constructor(
		start: WorkingPoint,
		private readonly engine: ModelEngine,
		private readonly stepS: number
	) {
		this.exhaustC = start.exhaustC;
	}

	step(point: WorkingPoint, random: Random) {
		const specificKwL = Math.min(point.powerKw / this.engine.displacementL, 90);
		const towards = (now: number, goal: number, tauS: number) =>
			now + (goal - now) * (1 - Math.exp(-this.stepS / tauS));
		this.coolantC = towards(this.coolantC, 83 + 0.09 * specificKwL, SETTLING_S.coolant);
		this.oilC = towards(this.oilC, 90 + 0.35 * specificKwL, SETTLING_S.oil);
		this.exhaustC = towards(this.exhaustC, point.exhaustC, SETTLING_S.exhaust);
		return {
			coolant_temp: this.coolantC + NOISE.temperatureC * random.normal(),
			oil_temp: this.oilC + NOISE.temperatureC * random.normal(),
			'exhaust_temp.1': this.exhaustC + 4 + NOISE.exhaustC * random.normal(),
			'exhaust_temp.2': this.exhaustC - 7 + NOISE.exhaustC * random.normal()
		};
	}
}

/** A store behind its inner resistance. */
class Store {
	private static readonly OPEN_V = 318;
	private static readonly RESISTANCE_OHM = 0.07;
	private charge = 0.64;

	constructor(
		private readonly fullMj: number,
		private readonly stepS: number
	) {}

	step(powerKw: number, random: Random) {
		const { OPEN_V, RESISTANCE_OHM } = Store;
		const current =
			(OPEN_V - Math.sqrt(OPEN_V ** 2 - 4 * RESISTANCE_OHM * 1000 * powerKw)) / (2 * RESISTANCE_OHM);
		this.charge -= (powerKw * this.stepS) / 1000 / this.fullMj;
		return {
			electrical_power: powerKw + NOISE.electricalKw * random.normal(),
			battery_voltage: OPEN_V - RESISTANCE_OHM * current + 0.05 * random.normal(),
			battery_current: current + 0.1 * random.normal(),
			state_of_charge: 100 * this.charge
		};
	}
}

/** Figures that the reduction of a sweep must find again, from the model without noise, as the cell's torque chain shows them. */
export type Truth = Record<string, number>;

/** Peaks over the speeds of a full-load sweep, at steady state. */
export function sweepTruth(
	bench: Bench,
	fromRpm: number,
	toRpm: number,
	capAt?: (rpm: number) => number
): Truth {
	const truth: Truth = {};
	const keep = (code: string, value: number, sign: 1 | -1 = 1) => {
		if (!(code in truth) || sign * value > sign * truth[code]!) truth[code] = value;
	};
	for (let rpm = fromRpm; rpm <= toRpm; rpm += 5) {
		const cap = capAt?.(rpm);
		const point = pointAt(bench, {
			speedRpm: rpm,
			rateRpmS: 0,
			load: 1,
			...(cap === undefined ? {} : { fuelCapKgH: cap })
		});
		const reads = bench.torqueReads ?? 1;
		keep('peak_power', reads * point.powerKw);
		keep('peak_torque', reads * point.torqueNm);
		keep('bte_max', reads * point.bte);
		keep('bsfc_min', (1000 * point.fuelFlowKgH) / (reads * point.powerKw), -1);
		keep('fuel_flow_max', point.fuelFlowKgH);
		keep('air_flow_max', point.airFlowKgH);
		keep('lambda_flow_min', point.lambda, -1);
		keep('manifold_pressure_max', point.manifoldKpa);
	}
	return truth;
}
