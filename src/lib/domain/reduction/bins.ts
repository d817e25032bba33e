import type { Columns } from '../trace/atmosphere';

export interface Binned {
	columns: Map<string, Float64Array>;
	/** Samples of speed in each bin. */
	n: Float64Array;
}

/**
 * Means of every channel over bins of speed, speed rising.
 *
 * @param columns per sample @param binBy speed by which samples are sorted into bins (freed of noise), rev/min
 * @param rows samples that count @param widthRpm width of a bin @param least fewest samples: a bin with fewer is left out, and so
 * is a channel in a bin where it has fewer known values
 */
export function binBySpeed(
	columns: Columns,
	binBy: Float64Array,
	rows: readonly number[],
	widthRpm: number,
	least: number
): Binned {
	const bins = new Map<number, number>();
	for (const row of rows) {
		const bin = Math.floor(binBy[row]! / widthRpm);
		if (Number.isFinite(bin)) bins.set(bin, (bins.get(bin) ?? 0) + 1);
	}
	const kept = [...bins].filter(([, count]) => count >= least).sort((a, b) => a[0] - b[0]);
	const slots = new Map(kept.map(([bin], slot) => [bin, slot]));
	const slotOf = Int32Array.from(rows, (row) => slots.get(Math.floor(binBy[row]! / widthRpm)) ?? -1);
	const means = new Map<string, Float64Array>();
	for (const [code, values] of columns) {
		const sums = new Float64Array(kept.length);
		const counts = new Float64Array(kept.length);
		for (let k = 0; k < rows.length; k++) {
			const slot = slotOf[k]!;
			const value = values[rows[k]!]!;
			if (slot < 0 || Number.isNaN(value)) continue;
			sums[slot]! += value;
			counts[slot]!++;
		}
		means.set(
			code,
			sums.map((sum, slot) => (counts[slot]! >= least ? sum / counts[slot]! : NaN))
		);
	}
	return { columns: means, n: Float64Array.from(kept, ([, count]) => count) };
}
