import { sql } from 'kysely';
import { jsonArrayFrom } from 'kysely/helpers/postgres';
import type { z } from 'zod';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { stale } from '../problem';
import { resolve } from '../refs';
import { chainsInForce, insertChain } from './chain-rows';
import type { Cell, CellChange, NewCell } from './schemas';

export { chainInForce, gearInForce } from './chain-rows';
export {
	ABSORBER_KINDS,
	AddedChainView,
	CellChange,
	CellView,
	NewCell,
	NewTorqueChain,
	TorqueChainView,
	TORQUE_PLACES,
	TouchedQuery,
	TouchedView,
	type Cell
} from './schemas';
export { addTorqueChain, listTorqueChain, recomputeCell, runsBehind, runsTouchedBy } from './torque-chain';

function selectCells(trx: Trx) {
	return trx
		.selectFrom('cell')
		.select((eb) => [
			'id',
			'code',
			'name',
			'absorberKind',
			'maxPowerKw',
			'maxTorqueNm',
			'maxSpeedRpm',
			'envelope',
			'rigUpMinutes',
			'rigDownMinutes',
			'openingHours',
			'colour',
			'version',
			jsonArrayFrom(
				eb
					.selectFrom('cellFuel')
					.innerJoin('fuel', 'fuel.id', 'cellFuel.fuelId')
					.select('fuel.code')
					.whereRef('cellFuel.cellId', '=', 'cell.id')
					.orderBy('fuel.code')
			).as('fuelRows')
		])
		.orderBy('code');
}

async function readCells(trx: Trx, now: Date, id?: string): Promise<Cell[]> {
	let cells = selectCells(trx);
	if (id) cells = cells.where('id', '=', id);
	const rows = await cells.execute();
	const chains = await chainsInForce(trx, now, id ? [id] : null);
	return rows.map((row) => {
		const { version: torqueChainVersion, ...chain } = chains.get(row.id)!;
		return {
			id: row.id,
			code: row.code,
			name: row.name,
			absorber: {
				kind: row.absorberKind as Cell['absorber']['kind'],
				maxPowerKw: row.maxPowerKw,
				maxTorqueNm: row.maxTorqueNm,
				maxSpeedRpm: row.maxSpeedRpm
			},
			envelope: row.envelope as Cell['envelope'],
			...chain,
			torqueChainVersion,
			fuels: row.fuelRows.length ? row.fuelRows.map((fuel) => fuel.code) : null,
			rigUpMinutes: row.rigUpMinutes,
			rigDownMinutes: row.rigDownMinutes,
			openingHours: row.openingHours as Cell['openingHours'],
			colour: row.colour,
			version: row.version
		};
	});
}

const readCell = async (trx: Trx, now: Date, id: string): Promise<Cell> =>
	(await readCells(trx, now, id))[0]!;

async function fuelIdsOf(trx: Trx, fuels: readonly string[] | null | undefined): Promise<string[]> {
	const ids = new Set<string>();
	for (const [index, fuel] of (fuels ?? []).entries())
		ids.add((await resolve(trx, 'fuel', fuel, { field: `fuels.${index}` })).id);
	return [...ids];
}

const absorberColumns = (absorber: Cell['absorber']) => ({
	absorberKind: absorber.kind,
	maxPowerKw: absorber.maxPowerKw,
	maxTorqueNm: absorber.maxTorqueNm,
	maxSpeedRpm: absorber.maxSpeedRpm
});

export async function createCell(deps: Deps, who: Principal, input: z.output<typeof NewCell>): Promise<Cell> {
	return writing(deps.pools, who, async (trx) => {
		const fuelIds = await fuelIdsOf(trx, input.fuels);
		const { id } = await trx
			.insertInto('cell')
			.values({
				code: input.code,
				name: input.name,
				...absorberColumns(input.absorber),
				envelope: input.envelope ? (jsonb(input.envelope) as never) : null,
				rigUpMinutes: input.rigUpMinutes,
				rigDownMinutes: input.rigDownMinutes,
				openingHours: input.openingHours ? (jsonb(input.openingHours) as never) : null,
				// The next colour of the set, so that neighbours differ.
				colour: input.colour ?? sql<number>`(select count(*) from cell)::smallint`
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		for (const fuelId of fuelIds) await trx.insertInto('cellFuel').values({ cellId: id, fuelId }).execute();
		const first = {
			cellId: id,
			version: 1,
			validFrom: null,
			reason: 'As first recorded with the cell'
		};
		await insertChain(trx, who, first, input);
		await recordAudit(trx, who, {
			action: 'cell.create',
			subject: 'cell',
			subjectId: id,
			clientId: null,
			after: input
		});
		return readCell(trx, deps.now(), id);
	});
}

/** Changes what a cell is now. How torque is weighed is not changed but gets a new version: `addTorqueChain`. */
export async function changeCell(
	deps: Deps,
	who: Principal,
	ref: string,
	change: z.output<typeof CellChange>,
	ifMatch: number | null
): Promise<Cell> {
	return writing(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		await trx.selectFrom('cell').select('id').where('id', '=', id).forUpdate().execute();
		const before = await readCell(trx, deps.now(), id);
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const { absorber, envelope, openingHours, fuels, ...plain } = change;
		await trx
			.updateTable('cell')
			.set({
				version: before.version + 1,
				...plain,
				...(absorber ? absorberColumns(absorber) : {}),
				...(envelope === undefined ? {} : { envelope: envelope && (jsonb(envelope) as never) }),
				...(openingHours === undefined
					? {}
					: { openingHours: openingHours && (jsonb(openingHours) as never) })
			})
			.where('id', '=', id)
			.execute();
		if (fuels !== undefined) {
			const fuelIds = await fuelIdsOf(trx, fuels);
			await trx.deleteFrom('cellFuel').where('cellId', '=', id).execute();
			for (const fuelId of fuelIds) await trx.insertInto('cellFuel').values({ cellId: id, fuelId }).execute();
		}
		await recordAudit(trx, who, {
			action: 'cell.change',
			subject: 'cell',
			subjectId: id,
			clientId: null,
			before,
			after: change
		});
		return readCell(trx, deps.now(), id);
	});
}

export async function listCells(deps: Deps, who: Principal): Promise<Cell[]> {
	return reading(deps.pools, who, (trx) => readCells(trx, deps.now()));
}

export async function getCell(deps: Deps, who: Principal, ref: string): Promise<Cell> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		return readCell(trx, deps.now(), id);
	});
}

/** Each cell's colour by its code: a tag anywhere names the code alone. */
export async function cellColours(deps: Deps, who: Principal): Promise<Record<string, number>> {
	const rows = await reading(deps.pools, who, (trx) =>
		trx.selectFrom('cell').select(['code', 'colour']).execute()
	);
	return Object.fromEntries(rows.map(({ code, colour }) => [code, colour]));
}
