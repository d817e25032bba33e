import uPlot from 'uplot';
import type { CurveTable } from './curve-data';

/** An earlier run's curve to stand behind. */
export interface Behind {
	number: string;
	table: CurveTable;
}

/** Dashes tell earlier runs apart where colour does not. */
export const BEHIND_DASHES: readonly (readonly number[])[] = [
	[7, 3],
	[2, 3],
	[10, 3, 2, 3],
	[4, 5],
	[1, 2]
];

/**
 * A pane's data with earlier curves behind its own, on one axis of all speeds. Where a curve has no point at another's speed its
 * line goes on; where it has a gap of its own the gap stays.
 */
export function joined(
	own: CurveTable,
	codes: readonly string[],
	behind: readonly Behind[]
): uPlot.AlignedData {
	const tables = [own, ...behind.map(({ table }) => table)].map((table): uPlot.AlignedData => [
		table.speed,
		...codes.map((code) => table.columns[code] ?? table.speed.map(() => null))
	]);
	return tables.length === 1 ? tables[0]! : uPlot.join(tables);
}
