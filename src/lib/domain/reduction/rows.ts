import { medianStep } from '../import/time';
import type { Finding, RunContext, RunKind } from '../model';
import { derive } from '../trace/derive';
import { correct, correctedMetrics } from './corrected';
import { curveMetrics } from './curve-metrics';
import { rowPlaces } from './curve-places';
import { toCurve, toPoints, type Reduced } from './reduced';

/** Reduces a table of points: each row is a stabilised point already; everything is derived per row. */
export function reducePoints(
	columns: ReadonlyMap<string, Float64Array>,
	rows: number,
	context: RunContext
): Reduced {
	const table = new Map(columns);
	for (const [code, values] of derive(columns, rows, context)) table.set(code, values);
	const correcting = correct(table, rows, context);
	for (const [code, values] of correcting.columns) table.set(code, values);
	const places = rowPlaces(table, 'point-row.1');
	return {
		metrics: { ...curveMetrics(places), ...correctedMetrics(correcting, places, table, context.correction) },
		points: toPoints(table, rows).map((point) => ({ ...point, n: 1 })),
		curve: toCurve(table),
		findings: correcting.findings
	};
}

/** Means of about one second of each channel: extremes of a log are those of the engine, not of single samples. */
function secondMeans(
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>
): { time: Float64Array; columns: Map<string, Float64Array> } {
	const step = medianStep(time);
	const starts: number[] = [];
	let from = -1;
	for (let i = 0; i < time.length; i++)
		if (
			from < 0 ||
			time[i]! >= time[from]! + 1 - step / 2 ||
			time[i]! - time[i - 1]! > Math.max(1, 5 * step)
		) {
			starts.push(i);
			from = i;
		}
	const means = new Map<string, Float64Array>();
	const over = (values: Float64Array) =>
		Float64Array.from(starts, (begin, k) => {
			const end = starts[k + 1] ?? values.length;
			let sum = 0;
			let n = 0;
			for (let i = begin; i < end; i++)
				if (!Number.isNaN(values[i]!)) {
					sum += values[i]!;
					n++;
				}
			return n > 0 ? sum / n : NaN;
		});
	for (const [code, values] of columns) means.set(code, over(values));
	return { time: over(time), columns: means };
}

const NOT_YET: Partial<Record<RunKind, string>> = {
	motoring: 'motoring',
	endurance: 'endurance'
};

/** Statistics of a whole log: extremes of one-second means. Motoring and endurance runs are read the same way for now, and say so. */
export function reduceLog(
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>,
	context: RunContext
): Reduced {
	const means = secondMeans(time, columns);
	const rows = means.time.length;
	const table = means.columns;
	for (const [code, values] of derive(table, rows, context)) table.set(code, values);
	const findings: Finding[] = [];
	const kind = NOT_YET[context.kind];
	if (kind)
		findings.push({
			code: 'kind_not_reduced',
			severity: 'info',
			message: `The figures are of the whole trace, as for a free log; the reduction made for ${kind} runs is not there yet.`,
			spans: []
		});
	const places = rowPlaces(table, 'second-mean.1', undefined, means.time);
	return { metrics: curveMetrics(places), points: [], curve: {}, findings };
}
