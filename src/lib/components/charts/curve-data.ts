import { shownLabel } from '$lib/domain/display/figure';
import type { UnitSystem } from '$lib/domain/display/unit-system';
import type { Curve } from '$lib/domain/model';
import { rises } from '../figures/curve-path';

/** Codes of a reduced curve that its chart knows how to place, top pane first. */
export const UPPER = ['power', 'torque'] as const;
export const LOWER = ['bte'] as const;

export interface CurveTable {
	/** Speeds in rising order. */
	speed: number[];
	/** By code, as printed: in the reader's units, fractions in %. */
	columns: Record<string, (number | null)[]>;
	/** Points held one after another: not to be joined. */
	isPoints: boolean;
}

/** The curve as a chart takes it: rows without a speed left out, speeds rising, values as they are printed. */
export function curveTable(curve: Curve, codes: readonly string[], units: UnitSystem): CurveTable {
	const order = (curve.speed ?? [])
		.map((rpm, at) => ({ rpm, at }))
		.filter((row): row is { rpm: number; at: number } => row.rpm !== null)
		.sort((a, b) => a.rpm - b.rpm);
	const columns: CurveTable['columns'] = {};
	for (const code of codes) {
		const values = curve[code];
		if (!values?.some((value) => value !== null)) continue;
		const { as, percent } = shownLabel(code, undefined, units);
		const scale = percent ? 100 : 1;
		columns[code] = order.map(({ at }) => {
			const value = values[at] ?? null;
			return value === null ? null : as.value(value) * scale;
		});
	}
	return { speed: order.map(({ rpm }) => rpm), columns, isPoints: !rises(curve.speed ?? []) };
}
