import type { z } from 'zod';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import { clientFor, resolve } from '../refs';
import type { EngineFields, NewEngine } from './schemas';

export { EngineView, NewEngine, type EngineFields } from './schemas';

function selectEngines(trx: Trx) {
	return trx
		.selectFrom('engine as e')
		.innerJoin('client as c', 'c.id', 'e.clientId')
		.select([
			'e.id',
			'c.code as client',
			'e.code',
			'e.name',
			'e.displacementL',
			'e.cylinders',
			'e.strokesPerCycle',
			'e.ignition',
			'e.inertiaKgM2',
			'e.induction',
			'e.boreMm',
			'e.strokeMm',
			'e.compressionRatio',
			'e.maxSpeedRpm',
			'e.expectedTorque',
			'e.version'
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectEngines>['executeTakeFirstOrThrow']>>;
const toEngine = (row: Row): EngineFields => ({
	...row,
	ignition: row.ignition as EngineFields['ignition'],
	induction: row.induction as EngineFields['induction'],
	expectedTorque: row.expectedTorque as EngineFields['expectedTorque']
});

export async function createEngine(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewEngine>
): Promise<EngineFields> {
	const { client, expectedTorque, ...facts } = input;
	return writing(deps.pools, who, async (trx) => {
		const clientId = await clientFor(trx, who, client);
		if (!clientId) throw wrongField('client', 'say whose engine this is.');
		const { id } = await trx
			.insertInto('engine')
			.values({
				...facts,
				clientId,
				expectedTorque: expectedTorque ? (jsonb(expectedTorque) as never) : null
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'engine.create',
			subject: 'engine',
			subjectId: id,
			clientId,
			after: input
		});
		return toEngine(await selectEngines(trx).where('e.id', '=', id).executeTakeFirstOrThrow());
	});
}

export async function listEngines(deps: Deps, who: Principal): Promise<EngineFields[]> {
	const rows = await reading(deps.pools, who, (trx) =>
		selectEngines(trx).orderBy('c.code').orderBy('e.code').execute()
	);
	return rows.map(toEngine);
}

export async function getEngine(deps: Deps, who: Principal, ref: string): Promise<EngineFields> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'engine', ref);
		return toEngine(await selectEngines(trx).where('e.id', '=', id).executeTakeFirstOrThrow());
	});
}
