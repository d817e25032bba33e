import { angularAccelerationRadS2, engineTorqueNm, inertiaBeforeSensor } from '../formulas/rotation';
import { medianStep } from '../import/time';
import type { RunContext } from '../model';

/** The fit of the acceleration needs no more than this; a faster record is averaged down to it first. */
const FIT_RATE_HZ = 25;
const WINDOW_S = 1;

/** dω/dt at every sample, rad/s², by the local fit over means of 1/25 s. */
export function accelerationOf(time: Float64Array, speed: Float64Array): Float64Array {
	const block = Math.max(1, Math.floor(1 / (FIT_RATE_HZ * medianStep(time))));
	if (!(block > 1)) return angularAccelerationRadS2(time, speed, WINDOW_S);
	const count = Math.ceil(time.length / block);
	const blockTime = new Float64Array(count);
	const blockSpeed = new Float64Array(count);
	for (let k = 0; k < count; k++) {
		let [sumT, sumN, n] = [0, 0, 0];
		const end = Math.min((k + 1) * block, time.length);
		for (let i = k * block; i < end; i++) {
			if (Number.isNaN(speed[i]!)) continue;
			sumT += time[i]!;
			sumN += speed[i]!;
			n++;
		}
		blockTime[k] = n > 0 ? sumT / n : time[k * block]!;
		blockSpeed[k] = n > 0 ? sumN / n : NaN;
	}
	const slopes = angularAccelerationRadS2(blockTime, blockSpeed, WINDOW_S);
	const acceleration = new Float64Array(time.length);
	for (let i = 0, k = 0; i < time.length; i++) {
		while (k < count - 2 && blockTime[k + 1]! < time[i]!) k++;
		const next = Math.min(k + 1, count - 1);
		const span = blockTime[next]! - blockTime[k]!;
		const share = span > 0 ? Math.min(Math.max((time[i]! - blockTime[k]!) / span, 0), 1) : 0;
		acceleration[i] = slopes[k]! + share * (slopes[next]! - slopes[k]!);
	}
	return acceleration;
}

export interface CorrectedTorque {
	torque: Float64Array;
	inertiaKgM2: number;
	counted: string[];
	missing: string[];
}

/**
 * Torque at the engine, `T_dyno + I·dω/dt`, per sample; null where the engine's inertia is unknown or zero.
 * A sample whose acceleration is unknown keeps no torque.
 */
export function torqueWithInertia(
	time: Float64Array,
	speed: Float64Array,
	torque: Float64Array,
	context: Pick<RunContext, 'engine' | 'cell'>
): CorrectedTorque | null {
	const counted = inertiaBeforeSensor(context.engine, context.cell);
	if (!counted || counted.inertiaKgM2 === 0) return null;
	const acceleration = accelerationOf(time, speed);
	return {
		torque: torque.map((value, i) => engineTorqueNm(value, counted.inertiaKgM2, acceleration[i]!)),
		inertiaKgM2: counted.inertiaKgM2,
		counted: counted.counted,
		missing: counted.missing
	};
}
