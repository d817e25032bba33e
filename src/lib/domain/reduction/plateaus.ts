import { medianStep } from '../import/time';

export interface Plateau {
	/** Half-open range of samples that are averaged: settling time left out. */
	from: number;
	to: number;
}

export interface PlateauSettings {
	speedTolerance: number;
	torqueTolerance: number;
	settleS: number;
	averageS: number;
}

interface Block {
	from: number;
	to: number;
	speed: number;
	torque: number;
}

/** Torque below this share of the run's highest is judged against that share: 2 % of nothing is nothing. */
const LOW_TORQUE_SHARE = 0.1;
const BLOCK_S = 1;

function meanOf(values: Float64Array, from: number, to: number): number {
	let sum = 0;
	let n = 0;
	for (let i = from; i < to; i++)
		if (!Number.isNaN(values[i]!)) {
			sum += values[i]!;
			n++;
		}
	return n > 0 ? sum / n : NaN;
}

/** Means of about one second: the spread that is judged is the engine's, not the noise of single samples. */
function blocks(time: Float64Array, speed: Float64Array, torque: Float64Array): Block[] {
	const step = medianStep(time);
	const found: Block[] = [];
	let from = 0;
	for (let i = 1; i <= time.length; i++) {
		const hole = i < time.length && time[i]! - time[i - 1]! > Math.max(5 * step, BLOCK_S);
		if (i < time.length && !hole && time[i]! < time[from]! + BLOCK_S - step / 2) continue;
		found.push({ from, to: i, speed: meanOf(speed, from, i), torque: meanOf(torque, from, i) });
		from = i;
	}
	return found;
}

/** Highest torque of the run by its second means, so that a spike does not widen what counts as steady. */
function highestTorque(means: readonly Block[]): number {
	return means.reduce((most, block) => (block.torque > most ? block.torque : most), 0);
}

class Spread {
	lo = Infinity;
	hi = -Infinity;
	sum = 0;
	n = 0;
	add(value: number): void {
		this.lo = Math.min(this.lo, value);
		this.hi = Math.max(this.hi, value);
		this.sum += value;
		this.n++;
	}
	/** Whether all values stay within the tolerance of their mean, were this one added. */
	holds(value: number, tolerance: number, least: number): boolean {
		const mean = (this.sum + value) / (this.n + 1);
		const most = tolerance * Math.max(Math.abs(mean), least);
		return Math.max(this.hi, value) - mean <= most && mean - Math.min(this.lo, value) <= most;
	}
}

/** The longest stretch from a block on in which every mean stays within tolerance of the stretch's own mean. */
function stretch(
	means: readonly Block[],
	start: number,
	leastTorque: number,
	settings: PlateauSettings
): number {
	const speed = new Spread();
	const torque = new Spread();
	let end = start;
	for (; end < means.length; end++) {
		const block = means[end]!;
		if (!speed.holds(block.speed, settings.speedTolerance, 1)) break;
		if (!torque.holds(block.torque, settings.torqueTolerance, leastTorque)) break;
		speed.add(block.speed);
		torque.add(block.torque);
	}
	return end;
}

/**
 * Finds steady points: stretches where the one-second means of speed and torque stay within tolerance of their mean; the first
 * `settleS` are left out, the rest, at least `averageS`, is averaged. A stretch is moved on until its start is settled, so that
 * the tail of a transition does not end it early.
 */
export function findPlateaus(
	time: Float64Array,
	speed: Float64Array,
	torque: Float64Array,
	settings: PlateauSettings
): Plateau[] {
	const means = blocks(time, speed, torque);
	const leastTorque = LOW_TORQUE_SHARE * highestTorque(means);
	const plateaus: Plateau[] = [];
	const duration = (from: number, to: number) => time[means[to - 1]!.to - 1]! - time[means[from]!.from]!;
	for (let start = 0; start < means.length;) {
		let end = stretch(means, start, leastTorque, settings);
		if (end <= start || duration(start, end) < settings.settleS) {
			start++;
			continue;
		}
		// A start inside the tail of a transition cuts the stretch short: of the starts within the settling time the longest is taken.
		const first = start;
		for (let later = first + 1; later < end && duration(first, later) <= settings.settleS; later++) {
			const reach = stretch(means, later, leastTorque, settings);
			if (reach - later <= end - start) continue;
			start = later;
			end = reach;
		}
		const begin = time[means[start]!.from]! + settings.settleS;
		// The last block may hold the first moment of the next transition.
		const lastBlock = end < means.length ? end - 1 : end;
		const to = means[Math.max(lastBlock, start + 1) - 1]!.to;
		let from = means[start]!.from;
		while (from < to && time[from]! < begin) from++;
		const step = to - from > 1 ? (time[to - 1]! - time[from]!) / (to - from - 1) : 0;
		if (to > from && time[to - 1]! - time[from]! + step >= settings.averageS * (1 - 1e-9))
			plateaus.push({ from, to });
		start = end;
	}
	return plateaus;
}
