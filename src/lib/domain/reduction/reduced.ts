import type { Curve, Finding, Metrics, Point } from '../model';

/** What a kind of run makes of a trace. */
export interface Reduced {
	metrics: Metrics;
	points: Point[];
	curve: Curve;
	findings: Finding[];
}

/** NaN has no place in JSON: unknown is null. */
export const orNull = (value: number | undefined): number | null =>
	value === undefined || !Number.isFinite(value) ? null : value;

/** Columns as equal-length lists by code, speed first. */
export function toCurve(columns: ReadonlyMap<string, Float64Array>): Curve {
	const curve: Curve = {};
	const speed = columns.get('speed');
	if (speed) curve['speed'] = Array.from(speed, orNull);
	for (const [code, values] of columns)
		if (code !== 'speed' && values.some(Number.isFinite)) curve[code] = Array.from(values, orNull);
	return curve;
}

/** Rows of columns as points. */
export function toPoints(columns: ReadonlyMap<string, Float64Array>, rows: number): Point[] {
	return Array.from({ length: rows }, (_, row) => {
		const point: Point = {};
		for (const [code, values] of columns) point[code] = orNull(values[row]);
		return point;
	});
}
