import { ease } from './ease';
import type { Instant, Profile } from './rig';

export interface SweepPlan {
	fromRpm: number;
	toRpm: number;
	rateRpmS: number;
	/** Comes down again under load after a short hold. */
	andDown?: boolean;
	/** Fuel flow that the engine's control may not pass, kg/h. */
	fuelCap?: (speedRpm: number, timeS: number) => number;
}

/** Part load, throttle opened, then the ramp begins. */
const LEAD_S = 4;
const HOLD_S = 1.5;
const CORNER_S = 0.5;

/** A full-load ramp: the throttle is opened at the lowest speed, then the brake lets the speed rise evenly. */
export function sweepProfile(plan: SweepPlan): Profile {
	const rampS = (plan.toRpm - plan.fromRpm) / plan.rateRpmS;
	const top = LEAD_S + rampS;
	const down = plan.andDown ? top + CORNER_S + HOLD_S : Infinity;
	const durationS = plan.andDown ? down + rampS + CORNER_S + HOLD_S : top + CORNER_S + HOLD_S;
	return {
		durationS,
		at(timeS): Instant {
			const rise = rampAt(timeS - LEAD_S, rampS);
			const fall = plan.andDown ? rampAt(timeS - down, rampS) : { way: 0, rate: 0 };
			const speedRpm = plan.fromRpm + plan.rateRpmS * (rise.way - fall.way);
			return {
				speedRpm,
				rateRpmS: plan.rateRpmS * (rise.rate - fall.rate),
				load: 0.35 + 0.65 * ease(1.2, 2, timeS),
				...(plan.fuelCap ? { fuelCapKgH: plan.fuelCap(speedRpm, timeS) } : {})
			};
		}
	};
}

/** Way and rate of a ramp of unit rate whose rate grows and falls evenly over the corners. */
function rampAt(timeS: number, rampS: number): { way: number; rate: number } {
	if (timeS <= 0) return { way: 0, rate: 0 };
	if (timeS < CORNER_S) return { way: timeS ** 2 / (2 * CORNER_S), rate: timeS / CORNER_S };
	if (timeS < rampS) return { way: timeS - CORNER_S / 2, rate: 1 };
	const left = rampS + CORNER_S - timeS;
	if (left <= 0) return { way: rampS, rate: 0 };
	return { way: rampS - left ** 2 / (2 * CORNER_S), rate: left / CORNER_S };
}

export interface SetPoint {
	speedRpm: number;
	load: number;
}

const MOVE_S = 7;

/** Points held one after another, with an easy move between them and the small hunting of a speed controller. */
export function steadyProfile(points: readonly SetPoint[], holdS: number): Profile {
	const period = holdS + MOVE_S;
	const smooth = (timeS: number) => {
		const k = Math.max(0, Math.min(Math.floor(timeS / period), points.length - 1));
		const [now, next] = [points[k]!, points[Math.min(k + 1, points.length - 1)]!];
		const s = ease(holdS, period, timeS - k * period);
		const speed = now.speedRpm + (next.speedRpm - now.speedRpm) * s;
		return {
			speedRpm: speed * (1 + 0.0012 * Math.sin((2 * Math.PI * timeS) / 5.3)),
			load: now.load + (next.load - now.load) * s
		};
	};
	return {
		durationS: points.length * period - MOVE_S,
		at(timeS) {
			const h = 1e-3;
			const rateRpmS = (smooth(timeS + h).speedRpm - smooth(timeS - h).speedRpm) / (2 * h);
			return { ...smooth(timeS), rateRpmS };
		}
	};
}

/** A load with an electrical machine beside the engine: it drives, charges and rests by a list of stretches. */
export function electricalProfile(
	stretches: readonly { seconds: number; load: number; electricalKw: number }[],
	speedRpm: number
): Profile {
	const ends: number[] = [];
	for (const { seconds } of stretches) ends.push((ends.at(-1) ?? 0) + seconds);
	const blend = (timeS: number, of: (stretch: (typeof stretches)[number]) => number) =>
		stretches
			.slice(1)
			.reduce(
				(value, stretch, k) =>
					value + (of(stretch) - of(stretches[k]!)) * ease(ends[k]! - 0.4, ends[k]! + 0.4, timeS),
				of(stretches[0]!)
			);
	return {
		durationS: ends.at(-1)!,
		at: (timeS) => ({
			speedRpm,
			rateRpmS: 0,
			load: blend(timeS, (stretch) => stretch.load),
			electricalKw: blend(timeS, (stretch) => stretch.electricalKw)
		})
	};
}
