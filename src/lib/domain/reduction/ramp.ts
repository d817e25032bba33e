import { fitAt } from '../statistics/local-fit';

export interface Ramp {
	direction: 'up' | 'down';
	/** Half-open range of samples. */
	from: number;
	to: number;
	/** Mean rate over the ramp, rev/min per s, signed. */
	rateRpmS: number;
	/** Speeds at its ends by a straight line through its first and last part, rev/min, low first. */
	speeds: [lo: number, hi: number];
}

interface Mean {
	from: number;
	to: number;
	timeS: number;
	rpm: number;
}

const BLOCK_S = 1;
/** A turn counts where the speed goes back by more than this share of all that the trace spans. */
const TURN_SHARE = 0.05;
/** Below this share of the highest speed there is no ramp to speak of. */
const LEAST_SPAN = 0.1;
/** A ramp's ends are cut back to where the speed moves at this share of the ramp's middle rate. */
const END_RATE_SHARE = 0.25;

/** Means over blocks of about one second; a fast ramp gets shorter blocks, so that it has at least twenty. */
function blockMeans(time: Float64Array, speed: Float64Array): Mean[] {
	const whole = time[time.length - 1]! - time[0]!;
	const block = Math.min(BLOCK_S, Math.max(whole / 20, 1e-9));
	const means: Mean[] = [];
	let from = 0;
	for (let i = 1; i <= time.length; i++) {
		if (i < time.length && time[i]! < time[from]! + block - 1e-9) continue;
		let sum = 0;
		let n = 0;
		for (let k = from; k < i; k++)
			if (!Number.isNaN(speed[k]!)) {
				sum += speed[k]!;
				n++;
			}
		if (n > 0) means.push({ from, to: i, timeS: (time[from]! + time[i - 1]!) / 2, rpm: sum / n });
		from = i;
	}
	return means;
}

/** Turning points: indices of means where the direction changes by more than the noise and small hesitations. */
function turns(means: readonly Mean[], least: number): number[] {
	const points = [0];
	let extreme = 0;
	let rising: boolean | null = null;
	for (let k = 1; k < means.length; k++) {
		const move = means[k]!.rpm - means[extreme]!.rpm;
		if (rising === null) {
			const fromStart = means[k]!.rpm - means[0]!.rpm;
			if (Math.abs(fromStart) > least) {
				rising = fromStart > 0;
				extreme = k;
			}
		} else if (rising ? move >= 0 : move <= 0) extreme = k;
		else if (Math.abs(move) > least) {
			points.push(extreme);
			rising = !rising;
			extreme = k;
		}
	}
	points.push(rising === null ? means.length - 1 : extreme);
	return points;
}

/** Leaves out what stands still before and after the moving part (an idle or a hold before the pull). */
function trimmed(means: readonly Mean[]): readonly Mean[] {
	const rates: number[] = [];
	for (let k = 1; k < means.length; k++)
		rates.push((means[k]!.rpm - means[k - 1]!.rpm) / (means[k]!.timeS - means[k - 1]!.timeS));
	const sign = Math.sign(means.at(-1)!.rpm - means[0]!.rpm);
	const sorted = rates.map((rate) => rate * sign).sort((a, b) => a - b);
	const usual = sorted[sorted.length >> 1]!;
	if (!(usual > 0)) return means;
	let from = 0;
	let to = means.length;
	while (from < rates.length && rates[from]! * sign < END_RATE_SHARE * usual) from++;
	while (to - 1 > from && rates[to - 2]! * sign < END_RATE_SHARE * usual) to--;
	return to - from >= 3 ? means.slice(from, to) : means;
}

function speedsAtEnds(time: Float64Array, speed: Float64Array, from: number, to: number): [number, number] {
	const part = Math.max(5, Math.min(Math.floor((to - from) / 10), Math.ceil((to - from) / 3)));
	const first = fitAt(time, speed, from, Math.min(from + part, to), time[from]!, 1)?.[0] ?? speed[from]!;
	const last = fitAt(time, speed, Math.max(to - part, from), to, time[to - 1]!, 1)?.[0] ?? speed[to - 1]!;
	return [Math.min(first, last), Math.max(first, last)];
}

/**
 * Finds the ramps of a power sweep: stretches where the means of one second go one way.
 *
 * @param time s, never falling @param speed rev/min, NaN where missing
 * @returns ramps in order of time; empty where the speed does not span a tenth of its highest value
 */
export function findRamps(time: Float64Array, speed: Float64Array): Ramp[] {
	if (time.length < 10) return [];
	const means = blockMeans(time, speed);
	let lo = Infinity;
	let hi = -Infinity;
	for (const mean of means) {
		lo = Math.min(lo, mean.rpm);
		hi = Math.max(hi, mean.rpm);
	}
	if (!(hi - lo > LEAST_SPAN * hi)) return [];
	const points = turns(means, TURN_SHARE * (hi - lo));
	const ramps: Ramp[] = [];
	for (let k = 1; k < points.length; k++) {
		const whole = means.slice(points[k - 1], points[k]! + 1);
		if (whole.length < 3) continue;
		const part = trimmed(whole);
		const [first, last] = [part[0]!, part.at(-1)!];
		const speeds = speedsAtEnds(time, speed, first.from, last.to);
		if (speeds[1] - speeds[0] < LEAST_SPAN * hi) continue;
		const rate = (last.rpm - first.rpm) / (last.timeS - first.timeS);
		ramps.push({
			direction: rate > 0 ? 'up' : 'down',
			from: first.from,
			to: last.to,
			rateRpmS: rate,
			speeds
		});
	}
	return ramps;
}
