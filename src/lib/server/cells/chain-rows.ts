import { sql, type RawBuilder } from 'kysely';
import type { z } from 'zod';
import type { Gear } from '$lib/domain/model';
import { inForceAt, periodsOf } from '$lib/domain/versions/periods';
import type { Principal } from '../access';
import type { Trx } from '../db';
import type { NewTorqueChain, TorqueChain } from './schemas';

/** What figures may know of a torque chain; why and by whom it was written is read apart, by staff alone. */
async function readRows(trx: Trx, cellIds: readonly string[] | null) {
	let rows = trx
		.selectFrom('torqueChain')
		.select([
			'id',
			'cellId',
			'version',
			'torqueAt',
			'armM',
			'gravityMps2',
			'gearRatio',
			'gearEfficiency',
			'rotorInertiaKgM2',
			'shaftInertiaKgM2',
			'validFrom',
			'createdAt'
		])
		.orderBy('version');
	if (cellIds) rows = rows.where('cellId', 'in', cellIds);
	return rows.execute();
}
type Row = Awaited<ReturnType<typeof readRows>>[number];

export function chainFacts(row: Row) {
	return {
		torqueAt: row.torqueAt as TorqueChain['torqueAt'],
		rotorInertiaKgM2: row.rotorInertiaKgM2,
		shaftInertiaKgM2: row.shaftInertiaKgM2,
		armM: row.armM,
		gravityMps2: row.gravityMps2,
		gear:
			row.gearRatio === null || row.gearEfficiency === null
				? null
				: { ratio: row.gearRatio, efficiency: row.gearEfficiency }
	};
}

/** The torque chain in force in each cell at one instant, by the cell's id. */
export async function chainsInForce(
	trx: Trx,
	at: Date,
	cellIds: readonly string[] | null = null
): Promise<Map<string, ReturnType<typeof chainFacts> & { version: number }>> {
	const byCell = new Map<string, Row[]>();
	for (const row of await readRows(trx, cellIds))
		byCell.set(row.cellId, [...(byCell.get(row.cellId) ?? []), row]);
	return new Map(
		[...byCell].map(([cellId, versions]) => {
			const row = inForceAt(versions, at);
			if (!row) throw new Error(`cell ${cellId} has no torque chain`);
			return [cellId, { version: row.version, ...chainFacts(row) }];
		})
	);
}

/** The torque chain that a run of this cell is computed with: the version in force at its start. */
export async function chainInForce(trx: Trx, cellId: string, at: Date) {
	const chain = (await chainsInForce(trx, at, [cellId])).get(cellId);
	if (!chain) throw new Error(`cell ${cellId} has no torque chain`);
	return chain;
}

/** The gear of the torque chain in force, inside another query; it chooses as `inForceAt` does. */
export const gearInForce = (cellId: RawBuilder<unknown>, at: RawBuilder<unknown>) => sql<Gear | null>`(
	select case when g.gear_ratio is not null
		then jsonb_build_object('ratio', g.gear_ratio, 'efficiency', g.gear_efficiency) end
	from torque_chain g where g.cell_id = ${cellId}
		and (g.valid_from is null or g.valid_from <= ${at})
	order by g.valid_from desc nulls last, g.version desc limit 1)`;

/** Every version with its dates, as far as they bear on which runs; oldest first. */
export const chainDates = (trx: Trx, cellId: string) =>
	trx
		.selectFrom('torqueChain')
		.select(['version', 'validFrom'])
		.where('cellId', '=', cellId)
		.orderBy('version')
		.execute();

/** All versions as this person may read them, newest first. */
export async function chainViews(trx: Trx, who: Principal, cellId: string): Promise<TorqueChain[]> {
	const rows = await readRows(trx, [cellId]);
	const periods = new Map(periodsOf(rows).map(({ version, period }) => [version.version, period]));
	const written = who.clientId
		? []
		: await trx
				.selectFrom('torqueChain as t')
				.leftJoin('person as p', 'p.id', 't.createdBy')
				.select(['t.version', 't.reason', 'p.displayName'])
				.where('t.cellId', '=', cellId)
				.execute();
	return rows
		.map((row) => {
			const why = written.find(({ version }) => version === row.version);
			return {
				version: row.version,
				...chainFacts(row),
				validFrom: row.validFrom,
				inForce: periods.get(row.version) ?? null,
				reason: why?.reason ?? null,
				writtenBy: why?.displayName ?? null,
				writtenAt: row.createdAt
			};
		})
		.reverse();
}

type ChainInput = Omit<z.output<typeof NewTorqueChain>, 'validFrom' | 'reason' | 'recompute'>;

export async function insertChain(
	trx: Trx,
	who: Principal,
	written: { cellId: string; version: number; validFrom: Date | null; reason: string },
	chain: ChainInput
): Promise<void> {
	await trx
		.insertInto('torqueChain')
		.values({
			...written,
			torqueAt: chain.torqueAt,
			armM: chain.armM ?? null,
			gravityMps2: chain.gravityMps2 ?? null,
			gearRatio: chain.gear?.ratio ?? null,
			gearEfficiency: chain.gear?.efficiency ?? null,
			rotorInertiaKgM2: chain.rotorInertiaKgM2 ?? null,
			shaftInertiaKgM2: chain.shaftInertiaKgM2 ?? null,
			createdBy: who.personId
		})
		.execute();
}

/** Makes writers of one cell's chain take turns, so that versions count without a gap. */
export const lockCell = (trx: Trx, cellId: string) =>
	sql`select from cell where id = ${cellId}::uuid for update`.execute(trx);
