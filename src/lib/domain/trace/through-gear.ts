import { throughGearNm } from '../formulas/rotation';
import type { CellFacts, Finding } from '../model';
import { figure } from './spans';
import type { Trace } from './trace';

/**
 * The trace with its torque at the engine, where the cell weighs it behind a gear (at the absorber's stator). Torque weighed in
 * line is on the engine's side already. Speed is the engine's by the channel's meaning.
 */
export function throughGear(trace: Trace, cell: CellFacts): { trace: Trace; findings: Finding[] } {
	const { gear } = cell;
	if (!gear || cell.torqueAt !== 'stator') return { trace, findings: [] };
	const isTorque = (code: string) => code === 'torque';
	if (!trace.columns.some(({ code }) => isTorque(code))) return { trace, findings: [] };
	return {
		trace: {
			...trace,
			columns: trace.columns.flatMap((column) =>
				isTorque(column.code)
					? [
							{ ...column, values: column.values.map((value) => throughGearNm(value, gear)) },
							{ ...column, code: `${column.header} (as recorded)` }
						]
					: [column]
			)
		},
		findings: [
			{
				code: 'torque_through_gear',
				severity: 'info',
				message: `The torque is weighed at the absorber, behind a gear of ratio ${figure(gear.ratio)} and efficiency ${figure(gear.efficiency)}; the figures have it at the engine, and the recorded column is kept under its own header.`,
				spans: [],
				channel: 'torque'
			}
		]
	};
}
