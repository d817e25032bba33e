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

/** Where the line through two means of the ramp meets the speed of the hold beside it; not further than the means next to it. */
function meeting(holdRpm: number, near: Mean, far: Mean, within: readonly [number, number]): number {
	const rate = (far.rpm - near.rpm) / (far.timeS - near.timeS);
	const at = near.timeS + (holdRpm - near.rpm) / rate;
	return Math.min(Math.max(Number.isFinite(at) ? at : within[0], within[0]), within[1]);
}

/**
 * The samples of a ramp between two turns, without a hold beside it (an idle or a full-load hold). Blocks are too coarse for where
 * a ramp begins, so the lines of ramp and hold tell it. A turn from up to down is no hold: its mean stands still for one block only.
 */
function withoutHolds(
	time: Float64Array,
	speed: Float64Array,
	means: readonly Mean[],
	low: number,
	high: number
): { from: number; to: number } {
	const rate = (a: number, b: number) =>
		(means[b]!.rpm - means[a]!.rpm) / (means[b]!.timeS - means[a]!.timeS);
	const usual = middle(Array.from({ length: high - low }, (_, k) => Math.abs(rate(low + k, low + k + 1))));
	const still = (a: number, b: number) =>
		Math.abs(rate(Math.min(a, b), Math.max(a, b))) < END_RATE_SHARE * usual;
	/** The block on one side (−1 before, 1 after) where a hold begins; null where there is none. */
	const holdFrom = (end: number, side: 1 | -1): number | null => {
		let block = end;
		while (block !== (side === 1 ? low : high) && still(block - side, block)) block -= side;
		let length = 0;
		while (means[block + side * (length + 1)] && still(block + side * length, block + side * (length + 1)))
			length++;
		return length >= 2 ? block : null;
	};
	const [before, after] = [holdFrom(low, -1), holdFrom(high, 1)];
	const sign = means[high]!.rpm > means[low]!.rpm ? 1 : -1;
	const turn = (block: number, extreme: 1 | -1) =>
		extremeSample(
			speed,
			means[Math.max(block - 1, 0)]!.from,
			means[Math.min(block + 1, means.length - 1)]!.to,
			extreme
		);
	let from = before === null && low > 0 ? turn(low, sign === 1 ? -1 : 1) : means[before ?? low]!.from;
	let to = after === null && high < means.length - 1 ? turn(high, sign) + 1 : means[after ?? high]!.to;
	if ((after ?? high) - (before ?? low) < 5) return { from, to };
	if (before !== null) {
		const [hold, near, far] = [means[before - 1]!, means[before + 2]!, means[before + 3]!];
		const start = meeting(hold.rpm, near, far, [time[hold.from]!, near.timeS]);
		while (from < to && time[from]! < start) from++;
	}
	if (after !== null) {
		const [hold, near, far] = [means[after + 1]!, means[after - 2]!, means[after - 3]!];
		const stop = meeting(hold.rpm, near, far, [near.timeS, time[hold.to - 1]!]);
		while (to > from && time[to - 1]! > stop) to--;
	}
	return { from, to };
}

const TURN_SAMPLES = 9;

/** The sample at which the speed turns, by a mean over a few samples. */
function extremeSample(speed: Float64Array, from: number, to: number, sign: 1 | -1): number {
	const half = Math.min(TURN_SAMPLES >> 1, Math.floor((to - from) / 8));
	let best = from;
	let most = -Infinity;
	for (let i = from + half; i < to - half; i++) {
		let sum = 0;
		for (let k = i - half; k <= i + half; k++) sum += speed[k]!;
		if (sign * sum > most) {
			most = sign * sum;
			best = i;
		}
	}
	return best;
}

function middle(values: readonly number[]): number {
	const sorted = [...values].sort((a, b) => a - b);
	return sorted[sorted.length >> 1] ?? 0;
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
		const [low, high] = [points[k - 1]!, points[k]!];
		if (high - low < 2) continue;
		const { from, to } = withoutHolds(time, speed, means, low, high);
		const speeds = speedsAtEnds(time, speed, from, to);
		if (speeds[1] - speeds[0] < LEAST_SPAN * hi) continue;
		const sign = means[high]!.rpm > means[low]!.rpm ? 1 : -1;
		const rateRpmS = (sign * (speeds[1] - speeds[0])) / (time[to - 1]! - time[from]!);
		ramps.push({ direction: sign > 0 ? 'up' : 'down', from, to, rateRpmS, speeds });
	}
	return ramps;
}
