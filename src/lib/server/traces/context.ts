import type {
	Ambient,
	CellFacts,
	ColumnMap,
	EngineFacts,
	FuelFacts,
	RunContext,
	RunSettings
} from '$lib/domain/model';
import { chainInForce } from '../cells';
import type { Trx } from '../db';
import { rulesInForce } from '../limits';

/** What a trace's figures depend on outside the file, and the ids and versions that say which. */
export interface TraceContext {
	context: RunContext;
	inputs: Record<string, string | number | null>;
}

export async function readContext(trx: Trx, traceId: string): Promise<TraceContext> {
	const row = await trx
		.selectFrom('trace as t')
		.innerJoin('run as r', 'r.id', 't.runId')
		.innerJoin('build as b', 'b.id', 'r.buildId')
		.innerJoin('engine as e', 'e.id', 'b.engineId')
		.innerJoin('cell', 'cell.id', 'r.cellId')
		.innerJoin('fuelBatch as f', 'f.id', 'r.fuelBatchId')
		.where('t.id', '=', traceId)
		.select([
			't.columnMap',
			'r.kind',
			'r.correction',
			'r.ambient',
			'r.settings',
			'r.limitSetId',
			'r.startedAt',
			'b.id as buildId',
			'e.id as engineId',
			'e.version as engineVersion',
			'e.displacementL',
			'e.cylinders',
			'e.strokesPerCycle',
			'e.ignition',
			'e.induction',
			'e.inertiaKgM2',
			'e.maxSpeedRpm',
			'e.expectedTorque',
			'cell.id as cellId',
			'cell.version as cellVersion',
			'f.id as fuelBatchId',
			'f.version as fuelBatchVersion',
			'f.properties'
		])
		.executeTakeFirstOrThrow();
	const judged = row.limitSetId ? await rulesInForce(trx, row.limitSetId, row.startedAt) : null;
	const engine: EngineFacts = {
		displacementL: row.displacementL,
		cylinders: row.cylinders,
		strokesPerCycle: row.strokesPerCycle as 2 | 4,
		ignition: row.ignition as EngineFacts['ignition'],
		induction: row.induction as EngineFacts['induction'],
		inertiaKgM2: row.inertiaKgM2,
		maxSpeedRpm: row.maxSpeedRpm,
		expectedTorque: row.expectedTorque as EngineFacts['expectedTorque']
	};
	// Arm and gravity weigh the sensor at its calibration, not the run: no figure takes them.
	const { torqueAt, rotorInertiaKgM2, shaftInertiaKgM2, gear, version } = await chainInForce(
		trx,
		row.cellId,
		row.startedAt
	);
	const cell: CellFacts = { torqueAt, rotorInertiaKgM2, shaftInertiaKgM2, gear };
	return {
		context: {
			kind: row.kind as RunContext['kind'],
			engine,
			cell,
			fuel: row.properties as FuelFacts,
			ambient: row.ambient as Ambient,
			correction: row.correction as RunContext['correction'],
			settings: row.settings as RunSettings,
			rules: judged?.rules ?? [],
			...(row.columnMap ? { map: row.columnMap as unknown as ColumnMap[] } : {})
		},
		inputs: {
			build: row.buildId,
			engine: row.engineId,
			engineVersion: row.engineVersion,
			cell: row.cellId,
			cellVersion: row.cellVersion,
			torqueChainVersion: version,
			fuelBatch: row.fuelBatchId,
			fuelBatchVersion: row.fuelBatchVersion,
			limitSet: row.limitSetId,
			limitSetVersion: judged?.version ?? null
		}
	};
}
