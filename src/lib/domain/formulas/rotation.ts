import type { CellFacts, EngineFacts, Gear } from '../model';
import { quadraticAt } from '../statistics/local-fit';

const NO_GEAR: Gear = { ratio: 1, efficiency: 1 };

export interface CountedInertia {
	inertiaKgM2: number;
	/** What is in it, for the method line of a figure. */
	counted: string[];
	/** What belongs in it and is unknown: the correction is too small by its share. */
	missing: string[];
}

/**
 * Inertia on the engine's side of where torque is measured: in-line flange = engine + shaft to its sensing plane; load cell on
 * a swinging stator = that and the rotor, which behind a gear counts as `I/(i²·η)` (it turns i times slower, and the gear's
 * loss is paid on the engine's side).
 * @returns kg·m², or null where the engine's own inertia is unknown (then no correction is made)
 */
export function inertiaBeforeSensor(engine: EngineFacts, cell: CellFacts): CountedInertia | null {
	if (engine.inertiaKgM2 === null) return null;
	const parts: [name: string, value: number | null][] = [
		['engine', engine.inertiaKgM2],
		['shaft', cell.shaftInertiaKgM2]
	];
	if (cell.torqueAt === 'stator') {
		const { ratio, efficiency } = cell.gear ?? NO_GEAR;
		const rotor = cell.rotorInertiaKgM2;
		parts.push(['rotor', rotor === null ? null : rotor / (ratio ** 2 * efficiency)]);
	}
	return {
		inertiaKgM2: parts.reduce((sum, [, value]) => sum + (value ?? 0), 0),
		counted: parts.filter(([, value]) => value !== null).map(([name]) => name),
		missing: parts.filter(([, value]) => value === null).map(([name]) => name)
	};
}

/**
 * Torque at the engine: `T_dyno + I·dω/dt`.
 * @param torqueNm at the sensor, N·m @param inertiaKgM2 `inertiaBeforeSensor`, kg·m² @param accelerationRadS2 dω/dt, rad/s²
 * @returns N·m
 */
export function engineTorqueNm(torqueNm: number, inertiaKgM2: number, accelerationRadS2: number): number {
	return torqueNm + inertiaKgM2 * accelerationRadS2;
}

/**
 * Torque on the engine's side of a gear from that at the absorber: `T/(i·η)` while the engine drives, `T·η/i` while the
 * absorber drives it (torque below zero), since the loss is always paid by whoever drives.
 * @param torqueNm at the absorber, N·m
 * @returns N·m
 */
export function throughGearNm(torqueNm: number, { ratio, efficiency }: Gear): number {
	return torqueNm >= 0 ? torqueNm / (ratio * efficiency) : (torqueNm * efficiency) / ratio;
}

/**
 * Torque of a dead weight on a calibration arm: `m·g·L`. Air's buoyancy is left out (0.015 % for steel).
 * @param massKg kg @param armM from the axis to the knife edge, m @param gravityMps2 at the place, m/s²
 * @returns N·m
 */
export const deadWeightTorqueNm = (massKg: number, armM: number, gravityMps2: number): number =>
	massKg * gravityMps2 * armM;

/**
 * dω/dt at each sample: slope of a quadratic fitted by least squares to the speeds within ±windowS/2 of it, never a raw difference.
 * @param timeS s, ascending @param speedRpm rev/min; unknown samples are left out
 * @param windowS whole width of the window, s; default 1
 * @returns rad/s²; NaN where the window holds fewer than 5 known samples or no spread of time
 */
export function angularAccelerationRadS2(
	timeS: ArrayLike<number>,
	speedRpm: ArrayLike<number>,
	windowS = 1
): Float64Array {
	const slope = new Float64Array(timeS.length);
	let first = 0;
	let end = 0;
	for (let i = 0; i < timeS.length; i++) {
		while (first < i && timeS[first]! < timeS[i]! - windowS / 2) first++;
		end = Math.max(end, i);
		while (end < timeS.length && timeS[end]! <= timeS[i]! + windowS / 2) end++;
		const fit = quadraticAt(timeS, speedRpm, first, end, timeS[i]!, 5);
		slope[i] = fit ? (fit[1] * 2 * Math.PI) / 60 : NaN;
	}
	return slope;
}
