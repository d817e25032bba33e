import { channelOf } from '../channels/catalogue';
import { electricalEnergy } from '../formulas/electrical';
import { medianStep } from '../import/time';
import type { Finding, RunContext } from '../model';
import { torqueWithInertia } from '../reduction/inertia';
import { ALWAYS_COMPUTED, derive } from './derive';
import type { Trace, TraceColumn } from './trace';

/**
 * Adds the channels that are computed per sample (power, BMEP, efficiencies, mixture …), so that charts and limits can use them.
 * In a power sweep they include the torque of the inertia, as the figures do; the torque column itself stays as recorded.
 * A recorded column of a code that is always computed is kept under its own header, and said.
 */
export function withDerived(trace: Trace, context: RunContext): { trace: Trace; findings: Finding[] } {
	const columns = new Map<string, Float64Array>();
	for (const column of trace.columns) if (channelOf(column.code)) columns.set(column.code, column.values);
	const [speed, torque] = [columns.get('speed'), columns.get('torque')];
	const corrected =
		context.kind === 'power_sweep' && trace.time && speed && torque
			? torqueWithInertia(trace.time, speed, torque, context)
			: null;
	const derived = derive(
		corrected ? new Map(columns).set('torque', corrected.torque) : columns,
		trace.rows,
		context
	);
	const electrical = columns.get('electrical_power');
	if (electrical && trace.time)
		derived.set(
			'electrical_energy_net',
			electricalEnergy(trace.time, electrical, 5 * medianStep(trace.time)).netMj
		);
	const findings: Finding[] = [];
	const kept = trace.columns.map((column) => {
		if (!derived.has(column.code) || !ALWAYS_COMPUTED.has(column.code)) return column;
		findings.push({
			code: 'recorded_beside_computed',
			severity: 'info',
			message: `${column.code} is computed from the measured channels; the recorded column is kept under its own header “${column.header}”.`,
			spans: [],
			channel: column.code
		});
		return { ...column, code: `${column.header} (as recorded)`, unit: column.unit };
	});
	const present = new Set(kept.map((column) => column.code));
	const added: TraceColumn[] = [];
	for (const [code, values] of derived) {
		const channel = channelOf(code);
		if (!channel || present.has(code) || !values.some(Number.isFinite)) continue;
		added.push({
			code,
			header: `${channel.label}, computed`,
			unit: channel.unit,
			sourceUnit: null,
			confidence: 1,
			index: null,
			values
		});
	}
	return { trace: { ...trace, columns: [...kept, ...added] }, findings };
}
