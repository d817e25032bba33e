import type { Span } from '../model';
import { medianStep } from '../import/time';

export interface OverSpans {
	spans: Span[];
	/** Half-open ranges of rows of the spans. */
	ranges: [from: number, to: number][];
}

/** Known samples further apart than this many of their own steps do not hang together. */
const HOLE_STEPS = 5;

/**
 * Stretches over a limit, judged on the known samples of the subject alone: a sample between two that are over and is not
 * itself known does not end a stretch; a hole in the record does.
 *
 * @param state per row: 1 over the limit, 0 within it, −1 not known
 * @param holdS a stretch that lasts shorter does not count; it lasts from its first sample to the step after its last
 * @param mergeGapS stretches closer than this are one
 */
export function spansOver(time: Float64Array, state: Int8Array, holdS: number, mergeGapS: number): OverSpans {
	const known: number[] = [];
	for (let i = 0; i < state.length; i++) if (state[i]! >= 0) known.push(i);
	const step = known.length > 1 ? medianStep(Float64Array.from(known, (row) => time[row]!)) : 0;
	const hole = Math.max(mergeGapS, HOLE_STEPS * step) * (1 + 1e-9);
	const stretches: [number, number][] = [];
	let from = -1;
	let last = -1;
	const close = () => {
		if (from >= 0) stretches.push([from, last]);
		from = -1;
	};
	for (const row of known) {
		if (from >= 0 && time[row]! - time[last]! > hole) close();
		if (state[row] === 1) {
			if (from < 0) from = row;
			last = row;
		} else close();
	}
	close();
	const merged: [number, number][] = [];
	for (const stretch of stretches) {
		const before = merged.at(-1);
		// A gap exactly as wide as the merge gap is bridged, rounding of the stamps aside.
		if (before && time[stretch[0]]! - time[before[1]]! <= mergeGapS + 1e-9 + step * 1e-6)
			before[1] = stretch[1];
		else merged.push([...stretch]);
	}
	const lasting = merged.filter(
		([a, b]) => time[b]! - time[a]! + (Number.isNaN(step) ? 0 : step) >= holdS - 1e-9
	);
	return {
		spans: lasting.map(([a, b]) => [time[a]!, time[b]!]),
		ranges: lasting.map(([a, b]) => [a, b + 1])
	};
}
