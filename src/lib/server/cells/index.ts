import { sql } from 'kysely';
import { jsonArrayFrom } from 'kysely/helpers/postgres';
import type { z } from 'zod';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';
import type { Cell, NewCell } from './schemas';

export { CellView, NewCell, type Cell } from './schemas';

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
			'torqueAt',
			'rotorInertiaKgM2',
			'shaftInertiaKgM2',
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
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectCells>['executeTakeFirstOrThrow']>>;

function toCell(row: Row): Cell {
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
		torqueAt: row.torqueAt as Cell['torqueAt'],
		rotorInertiaKgM2: row.rotorInertiaKgM2,
		shaftInertiaKgM2: row.shaftInertiaKgM2,
		fuels: row.fuelRows.length ? row.fuelRows.map((fuel) => fuel.code) : null,
		rigUpMinutes: row.rigUpMinutes,
		rigDownMinutes: row.rigDownMinutes,
		openingHours: row.openingHours as Cell['openingHours'],
		colour: row.colour,
		version: row.version
	};
}

export async function createCell(deps: Deps, who: Principal, input: z.output<typeof NewCell>): Promise<Cell> {
	return writing(deps.pools, who, async (trx) => {
		const fuelIds: string[] = [];
		for (const [index, fuel] of (input.fuels ?? []).entries())
			fuelIds.push((await resolve(trx, 'fuel', fuel, { field: `fuels.${index}` })).id);
		const { id } = await trx
			.insertInto('cell')
			.values({
				code: input.code,
				name: input.name,
				absorberKind: input.absorber.kind,
				maxPowerKw: input.absorber.maxPowerKw,
				maxTorqueNm: input.absorber.maxTorqueNm,
				maxSpeedRpm: input.absorber.maxSpeedRpm,
				envelope: input.envelope ? (jsonb(input.envelope) as never) : null,
				torqueAt: input.torqueAt,
				rotorInertiaKgM2: input.rotorInertiaKgM2 ?? null,
				shaftInertiaKgM2: input.shaftInertiaKgM2 ?? null,
				rigUpMinutes: input.rigUpMinutes,
				rigDownMinutes: input.rigDownMinutes,
				openingHours: input.openingHours ? (jsonb(input.openingHours) as never) : null,
				// The next colour of the set, so that neighbours differ.
				colour: sql<number>`(select count(*) from cell)::smallint`
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		for (const fuelId of fuelIds) await trx.insertInto('cellFuel').values({ cellId: id, fuelId }).execute();
		await recordAudit(trx, who, {
			action: 'cell.create',
			subject: 'cell',
			subjectId: id,
			clientId: null,
			after: input
		});
		return toCell(await selectCells(trx).where('id', '=', id).executeTakeFirstOrThrow());
	});
}

export async function listCells(deps: Deps, who: Principal): Promise<Cell[]> {
	return reading(deps.pools, who, async (trx) =>
		(await selectCells(trx).orderBy('code').execute()).map(toCell)
	);
}

export async function getCell(deps: Deps, who: Principal, ref: string): Promise<Cell> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'cell', ref);
		return toCell(await selectCells(trx).where('id', '=', id).executeTakeFirstOrThrow());
	});
}
