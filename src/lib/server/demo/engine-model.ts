import {
	airDensityKgM3,
	humidityRatio,
	vapourPressureAtKpa,
	vapourPressureKpa
} from '$lib/domain/formulas/humid-air';
import { theoreticalAirFlowKgH } from '$lib/domain/formulas/breathing';
import { revolutionsPerCycle } from '$lib/domain/formulas/performance';

/** Points of a line over speed, speeds rising; held constant past its ends. */
export type LineOverSpeed = readonly (readonly [rpm: number, value: number])[];

/** An engine as the model sees it. All constants of the demo lab's engines are invented. */
export interface ModelEngine {
	displacementL: number;
	strokesPerCycle: 2 | 4;
	ignition: 'spark' | 'compression';
	strokeMm: number;
	compressionRatio: number;
	maxSpeedRpm: number;
	/** Filling of the displacement at manifold conditions (two-stroke: delivery ratio): a broad hill and tuned lengths on it. */
	breathing: {
		best: number;
		atRpm: number;
		fall: number;
		tuned: readonly { atRpm: number; widthRpm: number; gain: number }[];
	};
	/** Pressure lost before the plenum at the highest speed, kPa; grows with the square of the speed. */
	inletLossKpa: number;
	boost: { ratio: LineOverSpeed; compressorEfficiency: number; coolerEffectiveness: number } | null;
	/** Lambda at full load. At part load a spark engine goes to 1 and a compression-ignition engine gets leaner by itself. */
	lambda: LineOverSpeed;
	/** Share of the air-standard efficiency that is reached at the best speed, and what is lost far below and above it. */
	combustion: { quality: number; bestRpm: number; lossLow: number; lossHigh: number };
	/** Two-stroke: share of the charge that stays in the cylinder; 1 for a four-stroke. */
	trapping: LineOverSpeed | null;
	friction: {
		constantKpa: number;
		perPeakPressure: number;
		perPistonSpeed: number;
		perPistonSpeedSquared: number;
	};
	/** Share of the released heat that leaves with the exhaust gas. */
	exhaustShare: number;
	oilReliefKpa: number;
}

export interface Surroundings {
	barometerKpa: number;
	temperatureC: number;
	humidityPct: number;
}

export interface ModelFuel {
	lhvMjKg: number;
	afrStoich: number;
	/** Share of the usual combustion quality that it reaches; 1 where it is not said. */
	burn?: number;
}

export interface Demand {
	speedRpm: number;
	/** 1 = full load. Spark: share of the full manifold pressure; compression: share of the full fuel. */
	load: number;
	/** The engine's own control holds the fuel flow at or below this, kg/h, and goes lean. */
	fuelCapKgH?: number;
}

export interface WorkingPoint {
	torqueNm: number;
	powerKw: number;
	fuelFlowKgH: number;
	/** Dry air, kg/h. */
	airFlowKgH: number;
	lambda: number;
	manifoldKpa: number;
	manifoldC: number;
	exhaustC: number;
	oilKpa: number;
	/** A fraction. */
	bte: number;
}

const AIR_STANDARD_GAMMA = { spark: 1.3, compression: 1.35 } as const;
/** Peak cylinder pressure over (manifold pressure × compression ratio), a rule of thumb for the friction form. */
const PEAK_PRESSURE_FACTOR = { spark: 5.2, compression: 4.2 } as const;
const EXHAUST_CP_KJ_KG_K = 1.17;
const COMPRESSOR_EXPONENT = 0.2857;

/**
 * The line at a speed, constant past its ends. Between its points a cubic whose slopes are harmonic means of the neighbouring
 * slopes (Fritsch and Butland): it bends without corners and never overshoots a point.
 */
export function lineAt(line: LineOverSpeed, rpm: number): number {
	const after = line.findIndex(([speed]) => speed >= rpm);
	if (after === -1) return line.at(-1)![1];
	if (after === 0) return line[0]![1];
	const [x0, y0] = line[after - 1]!;
	const [x1, y1] = line[after]!;
	const width = x1 - x0;
	const s = (rpm - x0) / width;
	const [m0, m1] = [slopeAt(line, after - 1) * width, slopeAt(line, after) * width];
	return (
		y0 * (1 + 2 * s) * (1 - s) ** 2 +
		m0 * s * (1 - s) ** 2 +
		y1 * s ** 2 * (3 - 2 * s) -
		m1 * s ** 2 * (1 - s)
	);
}

function slopeAt(line: LineOverSpeed, i: number): number {
	const between = (k: number) => (line[k + 1]![1] - line[k]![1]) / (line[k + 1]![0] - line[k]![0]);
	if (i === 0) return between(0);
	if (i === line.length - 1) return between(i - 1);
	const [before, behind] = [between(i - 1), between(i)];
	return before * behind > 0 ? (2 * before * behind) / (before + behind) : 0;
}

interface Plenum {
	kpa: number;
	celsius: number;
	/** Before the compressor or throttle, kPa. */
	inletKpa: number;
}

function plenumOf(engine: ModelEngine, air: Surroundings, speedRpm: number, load: number): Plenum {
	const inletKpa = air.barometerKpa - engine.inletLossKpa * (speedRpm / engine.maxSpeedRpm) ** 2;
	const throttle = engine.ignition === 'spark' ? load : 1;
	if (!engine.boost) return { kpa: inletKpa * throttle, celsius: air.temperatureC + 6, inletKpa };
	const full = lineAt(engine.boost.ratio, speedRpm);
	// A compression-ignition engine's charger follows its load; a spark engine's throttle does the rest.
	const ratio = 1 + (full - 1) * load;
	const roomK = air.temperatureC + 273.15;
	const compressedK = roomK * (1 + (ratio ** COMPRESSOR_EXPONENT - 1) / engine.boost.compressorEfficiency);
	const cooledK = compressedK - engine.boost.coolerEffectiveness * (compressedK - roomK);
	return {
		kpa: inletKpa * (engine.ignition === 'spark' ? full * load : ratio),
		celsius: cooledK - 273.15,
		inletKpa
	};
}

function filling({ breathing }: ModelEngine, speedRpm: number): number {
	const hill = breathing.best - breathing.fall * ((speedRpm - breathing.atRpm) / breathing.atRpm) ** 2;
	return breathing.tuned.reduce(
		(sum, { atRpm, widthRpm, gain }) => sum + gain * Math.exp(-(((speedRpm - atRpm) / widthRpm) ** 2)),
		hill
	);
}

/** How much of the efficiency a mixture keeps: unburnt fuel when rich, slower burning when very lean, smoke limit of a diesel. */
function mixtureFactor(ignition: ModelEngine['ignition'], lambda: number): number {
	if (ignition === 'compression') return 1 - 0.35 * Math.exp(-2.2 * (lambda - 1));
	return lambda < 1 ? 1 - 0.9 * (1 - lambda) : 1 + 0.15 * (lambda - 1) - 0.35 * (lambda - 1) ** 2;
}

function indicatedEfficiency(engine: ModelEngine, speedRpm: number, lambda: number): number {
	const airStandard = 1 - engine.compressionRatio ** (1 - AIR_STANDARD_GAMMA[engine.ignition]);
	const { quality, bestRpm, lossLow, lossHigh } = engine.combustion;
	const apart = speedRpm / bestRpm - 1;
	const bySpeed = 1 - (apart < 0 ? lossLow : lossHigh) * apart ** 2;
	return airStandard * quality * bySpeed * mixtureFactor(engine.ignition, lambda);
}

/**
 * Mean friction pressure in the form of Chen and Flynn (SAE 650733): `A + B·p_max + C·v_p + D·v_p²`, v_p mean piston speed in m/s.
 * @returns kPa
 */
function frictionKpa(engine: ModelEngine, speedRpm: number, manifoldKpa: number): number {
	const pistonSpeed = (2 * (engine.strokeMm / 1000) * speedRpm) / 60;
	const peakKpa = PEAK_PRESSURE_FACTOR[engine.ignition] * manifoldKpa * engine.compressionRatio;
	const { constantKpa, perPeakPressure, perPistonSpeed, perPistonSpeedSquared } = engine.friction;
	return (
		constantKpa +
		perPeakPressure * peakKpa +
		perPistonSpeed * pistonSpeed +
		perPistonSpeedSquared * pistonSpeed ** 2
	);
}

/** Exhaust back-pressure over plenum pressure; nothing for a two-stroke, whose crankcase pumps. */
function pumpingKpa(engine: ModelEngine, air: Surroundings, speedRpm: number, plenum: Plenum): number {
	if (engine.strokesPerCycle === 2) return 0;
	const back = 12 * (speedRpm / engine.maxSpeedRpm) ** 2;
	const turbine = engine.boost ? 0.9 * Math.max(0, plenum.kpa - air.barometerKpa) : 0;
	return 0.9 * Math.max(0, air.barometerKpa + back + turbine - plenum.kpa);
}

/**
 * A mean-value engine at one working point: air by filling and density, fuel by lambda, indicated work by the air-standard
 * efficiency of its compression ratio and what mixture and speed leave of it, less friction and pumping.
 *
 * @param demand speed in rev/min, within the engine's range; load from 0.2 to 1
 * @returns figures that hold together: power is 2πNT, BTE is power over fuel power, lambda is air over fuel
 */
export function workingPoint(
	engine: ModelEngine,
	air: Surroundings,
	fuel: ModelFuel,
	{ speedRpm, load, fuelCapKgH = Infinity }: Demand
): WorkingPoint {
	const nR = revolutionsPerCycle(engine.strokesPerCycle);
	const plenum = plenumOf(engine, air, speedRpm, load);
	const vapour = vapourPressureKpa(air.humidityPct, air.temperatureC);
	const density = airDensityKgM3(
		plenum.kpa,
		vapourPressureAtKpa(vapour, plenum.kpa, air.barometerKpa),
		plenum.celsius
	);
	const moist =
		filling(engine, speedRpm) * theoreticalAirFlowKgH(density, engine.displacementL, speedRpm, nR);
	const airFlowKgH = moist / (1 + humidityRatio(vapour, air.barometerKpa));
	const wished = lambdaAt(engine, speedRpm, load);
	const fuelFlowKgH = Math.min(airFlowKgH / (wished * fuel.afrStoich), fuelCapKgH);
	const lambda = airFlowKgH / (fuelFlowKgH * fuel.afrStoich);
	const trapped = engine.trapping ? lineAt(engine.trapping, speedRpm) : 1;

	const fuelKw = (fuelFlowKgH * fuel.lhvMjKg) / 3.6;
	const indicatedKw = fuelKw * trapped * indicatedEfficiency(engine, speedRpm, lambda) * (fuel.burn ?? 1);
	const lossKpa = frictionKpa(engine, speedRpm, plenum.kpa) + pumpingKpa(engine, air, speedRpm, plenum);
	// Mean pressure times swept volume per second, kPa·L/s = W.
	const lossKw = (lossKpa * engine.displacementL * speedRpm) / (60 * nR) / 1000;
	const powerKw = indicatedKw - lossKw;
	const releasedKw = fuelKw * trapped * Math.min(1, lambda) * 0.98;
	const gasKgS = (airFlowKgH + fuelFlowKgH) / 3600;
	return {
		torqueNm: (powerKw * 60_000) / (2 * Math.PI * speedRpm),
		powerKw,
		fuelFlowKgH,
		airFlowKgH,
		lambda,
		manifoldKpa: plenum.kpa,
		manifoldC: plenum.celsius,
		exhaustC: plenum.celsius + (engine.exhaustShare * releasedKw) / (gasKgS * EXHAUST_CP_KJ_KG_K),
		oilKpa: engine.oilReliefKpa * (1 - 0.85 * Math.exp((-3.2 * speedRpm) / engine.maxSpeedRpm)),
		bte: powerKw / fuelKw
	};
}

function lambdaAt(engine: ModelEngine, speedRpm: number, load: number): number {
	const full = lineAt(engine.lambda, speedRpm);
	if (engine.ignition === 'spark') return full + (1 - full) * Math.min(1, 2 * (1 - load));
	// Fuel follows the load while the air follows it less.
	const boost = engine.boost ? lineAt(engine.boost.ratio, speedRpm) : 1;
	return (full * (1 + (boost - 1) * load)) / (boost * load);
}
