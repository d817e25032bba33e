import { changeBuild, createBuild, followBuild, listBuilds, NewBuild, type Build } from '../builds';
import { createCell, listCells, NewCell } from '../cells';
import { createClient, listClients, NewClient } from '../clients';
import type { Deps } from '../deps';
import { createEngine, listEngines, NewEngine } from '../engines';
import { createFuel, createFuelBatch, listFuelBatches, listFuels, NewFuel, NewFuelBatch } from '../fuels';
import { createLimitSet, listLimitSets, NewLimitSet } from '../limits';
import { DEMO_CELLS } from './lab/cells';
import type { DemoEngine } from './lab/engine';
import { DEMO_ENGINES } from './lab/engines';
import { DEMO_BATCHES, DEMO_FUELS } from './lab/fuels';
import { DEMO_LIMIT_SETS } from './lab/limits';
import { DEMO_CLIENTS } from './lab/people';
import type { Cast } from './people';

const ALL = { limit: 500 };

interface Owned {
	client?: string | null | undefined;
	code: string;
}
const isIn = (rows: readonly Owned[], wanted: Owned) =>
	rows.some(({ client, code }) => code === wanted.code && (client ?? null) === (wanted.client ?? null));

export async function addClients(deps: Deps, cast: Cast): Promise<void> {
	const known = await listClients(deps, cast('manager'));
	for (const client of DEMO_CLIENTS)
		if (!isIn(known, { code: client.code }))
			await createClient(deps, cast('manager'), NewClient.parse(client));
}

/** Fuels, batches, cells and limit sets, each by whoever would make it. */
export async function addLab(deps: Deps, cast: Cast): Promise<void> {
	const [manager, engineer] = [cast('manager'), cast('engineer')];
	const fuels = await listFuels(deps, engineer);
	for (const fuel of DEMO_FUELS)
		if (!isIn(fuels, { code: fuel.code })) await createFuel(deps, engineer, NewFuel.parse(fuel));
	const batches = (await listFuelBatches(deps, engineer, ALL)).items;
	for (const batch of DEMO_BATCHES)
		if (!isIn(batches, batch)) await createFuelBatch(deps, engineer, NewFuelBatch.parse(batch));
	const cells = await listCells(deps, manager);
	for (const cell of DEMO_CELLS)
		if (!isIn(cells, { code: cell.code })) await createCell(deps, manager, NewCell.parse(cell));
	const limits = await listLimitSets(deps, engineer);
	for (const set of DEMO_LIMIT_SETS)
		if (!isIn(limits, set)) await createLimitSet(deps, engineer, NewLimitSet.parse(set));
}

/** Engines with their builds, parents first; each client follows its own. */
export async function addEngines(deps: Deps, cast: Cast): Promise<void> {
	const builder = cast('builder');
	const engines = await listEngines(deps, builder);
	for (const engine of DEMO_ENGINES) {
		if (!isIn(engines, engine)) await createEngine(deps, builder, NewEngine.parse(engineInput(engine)));
		await addBuilds(deps, cast, engine);
	}
}

function engineInput({
	client,
	code,
	name,
	cylinders,
	boreMm,
	inertiaKgM2,
	induction,
	expectedTorque,
	model
}: DemoEngine) {
	const { displacementL, strokesPerCycle, ignition, strokeMm, compressionRatio, maxSpeedRpm } = model;
	return {
		client,
		code,
		name,
		displacementL,
		cylinders,
		strokesPerCycle,
		ignition,
		induction,
		inertiaKgM2,
		boreMm,
		strokeMm,
		compressionRatio,
		maxSpeedRpm,
		expectedTorque
	};
}

async function addBuilds(deps: Deps, cast: Cast, engine: DemoEngine): Promise<void> {
	const [builder, customer] = [cast('builder'), cast(engine.client)];
	const known = (await listBuilds(deps, builder, { client: engine.client, ...ALL })).items;
	for (const { number, title, parent, parts, state } of engine.builds) {
		let build: Build | undefined = known.find((one) => one.number === number);
		build ??= await createBuild(
			deps,
			builder,
			NewBuild.parse({ client: engine.client, engine: engine.code, number, title, parent, parts })
		);
		// Only a build as it was made still needs its state; a later change is somebody's own.
		if (build.version === 1 && state !== build.state)
			await changeBuild(deps, builder, build.id, { state }, build.version);
		await followBuild(deps, customer, build.id, true);
	}
}
