import type { Metrics, RunContext } from '../model';
import { derive } from '../trace/derive';
import type { Trace } from '../trace/trace';
import { reductionColumns } from './prepare';
import { rawExtremes } from './raw-extremes';
import type { Reduced } from './reduced';
import { reduceLog, reducePoints } from './rows';
import { reduceSteady } from './steady';
import { reduceSweep } from './sweep';
import { totals } from './totals';

/** Torque of a run that recorded only power: the reductions stand on torque. */
function withTorque(
	columns: Map<string, Float64Array>,
	rows: number,
	context: RunContext
): Map<string, Float64Array> {
	if (columns.has('torque')) return columns;
	const torque = derive(columns, rows, context).get('torque');
	return torque ? new Map(columns).set('torque', torque) : columns;
}

function byKind(trace: Trace, columns: Map<string, Float64Array>, context: RunContext): Reduced {
	const { time } = trace;
	if (!time) return reducePoints(columns, trace.rows, context);
	switch (context.kind) {
		case 'power_sweep':
			return reduceSweep(time, withTorque(columns, trace.rows, context), context);
		case 'steady_points':
			return reduceSteady(time, withTorque(columns, trace.rows, context), context);
		case 'point_table':
			return reducePoints(columns, trace.rows, context);
		case 'motoring':
		case 'endurance':
		case 'free_log':
			return reduceLog(time, columns, context);
	}
}

/**
 * Reduces a trace to figures by the kind of its run.
 *
 * @param trace samples in internal units, with the channels that are computed per sample
 * @param spikes rows left out of the figures, by channel; the trace keeps them
 * @param stepS usual step of the clock, s; NaN without one
 * @returns figures, points, curve and what the reduction has to say
 */
export function reduce(
	trace: Trace,
	spikes: ReadonlyMap<string, readonly number[]>,
	stepS: number,
	context: RunContext
): Reduced {
	const measured = { ...trace, columns: trace.columns.filter((column) => column.index !== null) };
	const columns = reductionColumns(measured, spikes);
	const reduced = byKind(measured, columns, context);
	const whole = new Map(columns);
	for (const [code, values] of derive(columns, trace.rows, context)) whole.set(code, values);
	const recorded = new Map(trace.columns.map((column) => [column.code, column.values]));
	const metrics: Metrics = {
		...reduced.metrics,
		...(trace.time && context.kind !== 'point_table'
			? totals(trace.time, whole, stepS, context.fuel.lhvMjKg?.value)
			: {}),
		...rawExtremes(recorded, trace.time),
		rows: { value: trace.rows, unit: '-', u: null, at: null, method: 'count.1' }
	};
	return { ...reduced, metrics };
}
