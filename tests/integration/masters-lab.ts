import type { Principal } from '../../src/lib/server/access';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { getRun, NewRun, openRun } from '../../src/lib/server/runs';
import { processTrace, receiveTrace } from '../../src/lib/server/traces';
import { bytesOf, truthOf } from '../traces/traces';
import { hour, useBookingLab } from './booking-lab';

export const SWEEP = 'sweep-plain.csv';

/** A lab whose engines, builds and fuels run: a client's engine as the sweep was made with, and what a run of it needs. */
export function useMastersLab() {
	const lab = useBookingLab();

	/** A client with an engine as the sweep was made with, a build of it, a fuel, a batch and a cell. */
	async function scene(code: string) {
		const manager = await lab.person('manager');
		const engineer = await lab.person('engineer');
		const own = await lab.client(code);
		const client = await lab.person('client', own.id);
		const { engine } = truthOf(SWEEP);
		const build = await lab.build(code, {
			displacementL: engine.displacement_l,
			maxSpeedRpm: 9000,
			expectedTorque: null
		});
		const cell = await lab.cell();
		const fuel = await createFuel(lab.deps, manager, NewFuel.parse({ code: `F-${code}`, name: 'Fuel' }));
		const batch = await createFuelBatch(
			lab.deps,
			manager,
			NewFuelBatch.parse({
				client: code,
				fuel: fuel.code,
				code: `Q-${code}`,
				lhvMjKg: { value: engine.lhv_mj_per_kg, u: 0.05, method: 'Bomb calorimeter' },
				afrStoich: engine.afr_stoich
			})
		);
		const run = (startedAt = hour(1)) =>
			openRun(
				lab.deps,
				manager,
				NewRun.parse({
					client: code,
					build: build.id,
					cell: cell.code,
					fuelBatch: batch.id,
					kind: 'power_sweep',
					startedAt: startedAt.toISOString()
				})
			);
		return { manager, engineer, client, own, build, cell, fuel, batch, run };
	}

	/** A run's trace from its bytes to its figures, as the worker does it. */
	async function withTrace(manager: Principal, runId: string, clientId: string) {
		const { id: traceId } = await receiveTrace(lab.deps, manager, runId, {
			filename: SWEEP,
			body: new Blob([bytesOf(SWEEP)]).stream(),
			declaredBytes: null
		});
		await processTrace(lab.deps, { clientId, traceId });
		return traceId;
	}

	const figureOf = async (who: Principal, run: string, code: string) =>
		(await getRun(lab.deps, who, run)).metrics[code]!.value;

	/** Traces that wait to be computed again, behind users' work. */
	async function queuedAgain(): Promise<string[]> {
		const { rows } = await lab.deps.pools.queuePool.query<{ key: string }>(
			`select key from graphile_worker.jobs where priority = 50 order by id`
		);
		return rows.map(({ key }) => key.replace('trace.process:', ''));
	}

	return { lab, scene, withTrace, figureOf, queuedAgain };
}
