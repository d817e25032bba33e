import { describe, expect, it } from 'vitest';
import {
	buildHistory,
	changeBuild,
	createBuild,
	engineHours,
	getBuild,
	getBuildRecord,
	listBuilds
} from '../../src/lib/server/builds';
import {
	changeEngine,
	engineBehind,
	engineHistory,
	getEngine,
	pageEngines,
	recomputeEngine
} from '../../src/lib/server/engines';
import {
	changeFuel,
	changeFuelBatch,
	checkFuelBatch,
	createFuel,
	createFuelBatch,
	fuelBatchBehind,
	FuelBatchChange,
	fuelBatchHistory,
	listFuelBatches,
	listFuelBatchVersions,
	NewFuel,
	NewFuelBatch,
	recomputeFuelBatch
} from '../../src/lib/server/fuels';
import { createLimitSet } from '../../src/lib/server/limits';
import { acceptRun, closeRun, NewRun, openRun, voidRun } from '../../src/lib/server/runs';
import { processTrace, receiveTrace } from '../../src/lib/server/traces';
import { bytesOf, truthOf } from '../traces/traces';
import { hour, refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();
const SWEEP = 'sweep-plain.csv';

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
async function withTrace(manager: Parameters<typeof receiveTrace>[1], runId: string, clientId: string) {
	const { id: traceId } = await receiveTrace(lab.deps, manager, runId, {
		filename: SWEEP,
		contentLength: null,
		body: new Blob([new Uint8Array(bytesOf(SWEEP))]).stream()
	} as never);
	await processTrace(lab.deps, { clientId, traceId });
	return traceId;
}
