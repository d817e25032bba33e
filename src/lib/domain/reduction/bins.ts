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

const DEFAULT_WIDTH_RPM = 100;
const WIDER_RPM = [200, 250, 500, 1000];
const NARROWER_RPM = [50, 25, 10];
/** A curve of fewer bins than this is drawn with narrower ones, where the samples allow. */
const LEAST_BINS = 10;
const FILLED_SHARE = 0.8;

function filledShare(
	binBy: Float64Array,
	rows: readonly number[],
	widthRpm: number,
	least: number
): { bins: number; share: number } {
	const counts = new Map<number, number>();
	for (const row of rows) {
		const bin = Math.floor(binBy[row]! / widthRpm);
		if (Number.isFinite(bin)) counts.set(bin, (counts.get(bin) ?? 0) + 1);
	}
	if (counts.size === 0) return { bins: 0, share: 0 };
	let [lo, hi] = [Infinity, -Infinity];
	let filled = 0;
	for (const [bin, count] of counts) {
		lo = Math.min(lo, bin);
		hi = Math.max(hi, bin);
		if (count >= least) filled++;
	}
	return { bins: filled, share: filled / (hi - lo + 1) };
}

/**
 * The width of bins where the run does not set one: 100 rev/min, wider where a fast ramp or a slow recorder would leave bins
 * empty, narrower where the ramp spans too few of them.
 */
export function defaultBinWidth(binBy: Float64Array, rows: readonly number[], least: number): number {
	const usual = filledShare(binBy, rows, DEFAULT_WIDTH_RPM, least);
	if (usual.share < FILLED_SHARE)
		return (
			WIDER_RPM.find((width) => filledShare(binBy, rows, width, least).share >= FILLED_SHARE) ??
			WIDER_RPM.at(-1)!
		);
	if (usual.bins >= LEAST_BINS) return DEFAULT_WIDTH_RPM;
	const fine = NARROWER_RPM.filter((width) => filledShare(binBy, rows, width, least).share >= FILLED_SHARE);
	return (
		fine.find((width) => filledShare(binBy, rows, width, least).bins >= LEAST_BINS) ??
		fine.at(-1) ??
		DEFAULT_WIDTH_RPM
	);
}
