/**
 * Moves a channel back by its transport and response delay: `t_true = t_recorded − delay`.
 *
 * Each reading is carried to the row nearest its true time and takes there the straight line between its neighbours, so that
 * a slow channel stays as sparse as it was. Where the record ends before the delay has passed the channel is unknown.
 *
 * @param time s, never falling
 * @param values one per time; NaN where missing
 * @param delayS s, positive where the instrument lags
 */
export function delayed(time: Float64Array, values: Float64Array, delayS: number): Float64Array {
	const known: number[] = [];
	for (let i = 0; i < values.length; i++) if (!Number.isNaN(values[i]!)) known.push(i);
	const moved = new Float64Array(values.length).fill(NaN);
	let row = 0;
	let next = 0;
	for (const from of known) {
		const wanted = time[from]! - delayS;
		if (wanted < time[0]! - 1e-9 || wanted > time[time.length - 1]! + 1e-9) continue;
		while (row + 1 < time.length && Math.abs(time[row + 1]! - wanted) <= Math.abs(time[row]! - wanted)) row++;
		const recorded = time[row]! + delayS;
		while (next < known.length - 1 && time[known[next]!]! < recorded - 1e-9) next++;
		const after = known[next]!;
		const before = known[Math.max(next - 1, 0)]!;
		const span = time[after]! - time[before]!;
		const share = span > 0 ? Math.min(Math.max((recorded - time[before]!) / span, 0), 1) : 1;
		// On the stamp itself the reading is taken unaltered.
		moved[row] =
			share > 1 - 1e-9 ? values[after]! : values[before]! + share * (values[after]! - values[before]!);
	}
	return moved;
}
