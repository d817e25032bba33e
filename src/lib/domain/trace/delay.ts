import { medianStep } from '../import/time';

/** Fuller channels than this are read off at every row; sparser ones keep to as many rows as they have readings. */
const SPARSE_SHARE = 0.5;
const LONGEST_GAP_STEPS = 5;

/**
 * Moves a channel back by its transport and response delay: `t_true = t_recorded − delay`.
 *
 * Each row takes what the channel was recorded as one delay later, on the straight line between the neighbouring readings; a
 * slow channel stays as sparse as it was. Where the record ends before the delay has passed, and in holes of the channel, it is
 * unknown.
 *
 * @param time s, never falling
 * @param values one per time; NaN where missing
 * @param delayS s, positive where the instrument lags
 */
export function delayed(time: Float64Array, values: Float64Array, delayS: number): Float64Array {
	const known: number[] = [];
	for (let i = 0; i < values.length; i++) if (!Number.isNaN(values[i]!)) known.push(i);
	const moved = new Float64Array(values.length).fill(NaN);
	if (known.length === 0) return moved;
	const longest = LONGEST_GAP_STEPS * medianStep(Float64Array.from(known, (row) => time[row]!));
	let next = 0;
	for (const row of rowsToFill(time, known, delayS, values.length)) {
		const recorded = time[row]! + delayS;
		while (next < known.length - 1 && time[known[next]!]! < recorded - 1e-9) next++;
		const after = known[next]!;
		const before = known[Math.max(next - 1, 0)]!;
		const [t0, t1] = [time[before]!, time[after]!];
		if (recorded > t1 + 1e-9 || recorded < t0 - 1e-9 || t1 - t0 > longest) continue;
		const share = t1 > t0 ? Math.min(Math.max((recorded - t0) / (t1 - t0), 0), 1) : 1;
		// On the stamp itself the reading is taken unaltered.
		moved[row] =
			share > 1 - 1e-9 ? values[after]! : values[before]! + share * (values[after]! - values[before]!);
	}
	return moved;
}

/** Every row for a full channel; for a sparse one the row nearest to each reading's true time. */
function rowsToFill(
	time: Float64Array,
	known: readonly number[],
	delayS: number,
	rows: number
): Iterable<number> {
	if (known.length > SPARSE_SHARE * rows) return Array.from({ length: rows }, (_, row) => row);
	const wanted = new Set<number>();
	let row = 0;
	for (const from of known) {
		const at = time[from]! - delayS;
		if (at < time[0]! - 1e-9 || at > time[rows - 1]! + 1e-9) continue;
		while (row + 1 < rows && Math.abs(time[row + 1]! - at) <= Math.abs(time[row]! - at)) row++;
		wanted.add(row);
	}
	return wanted;
}
