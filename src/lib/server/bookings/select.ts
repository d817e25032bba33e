import { sql } from 'kysely';
import { gearInForce } from '../cells';
import type { Trx } from '../db';

/** A booking with what a view of it needs; row-level security decides which. */
export function selectBookings(trx: Trx) {
	return trx
		.selectFrom('booking as b')
		.innerJoin('client as cl', 'cl.id', 'b.clientId')
		.innerJoin('cell as c', 'c.id', 'b.cellId')
		.innerJoin('build as bu', 'bu.id', 'b.buildId')
		.innerJoin('engine as e', 'e.id', 'bu.engineId')
		.leftJoin('fuelBatch as fb', 'fb.id', 'b.fuelBatchId')
		.leftJoin('person as asker', 'asker.id', 'b.requestedBy')
		.leftJoin('person as decider', 'decider.id', 'b.decidedBy')
		.leftJoin('booking as old', 'old.id', 'b.replacesId')
		.leftJoin('booking as mv', (join) =>
			join.onRef('mv.replacesId', '=', 'b.id').on('mv.state', '=', 'requested')
		)
		.select((eb) => [
			'b.id',
			'b.number',
			'b.state',
			'b.during',
			'b.cellId',
			'b.buildId',
			'b.requestedBy as requestedById',
			'b.replacesId',
			'b.kind',
			'b.purpose',
			'b.reason',
			'b.requestedAt',
			'b.decidedAt',
			'b.version',
			'cl.code as client',
			'cl.name as clientName',
			'c.code as cell',
			'c.name as cellName',
			'c.absorberKind',
			'c.maxPowerKw',
			'c.maxTorqueNm',
			'c.maxSpeedRpm',
			'c.envelope',
			gearInForce(sql`c.id`, sql`lower(b.during)`).as('gear'),
			'c.openingHours',
			'bu.number as build',
			'bu.title as buildTitle',
			'bu.state as buildState',
			'e.code as engine',
			'e.maxSpeedRpm as engineMaxSpeedRpm',
			'e.expectedTorque',
			'fb.code as fuelBatch',
			'asker.displayName as requestedBy',
			'decider.displayName as decidedBy',
			'old.number as replaces',
			'mv.number as moveRequest',
			eb.fn.coalesce('b.rigUpMinutes', 'c.rigUpMinutes').as('rigUpMinutes'),
			eb.fn.coalesce('b.rigDownMinutes', 'c.rigDownMinutes').as('rigDownMinutes'),
			// A cell without any fuel listed takes every fuel.
			sql<boolean>`fb.id is not null
				and exists (select from cell_fuel cf where cf.cell_id = c.id)
				and not exists (select from cell_fuel cf where cf.cell_id = c.id and cf.fuel_id = fb.fuel_id)`.as(
				'fuelMissing'
			)
		]);
}

export type BookingRow = Awaited<ReturnType<ReturnType<typeof selectBookings>['executeTakeFirstOrThrow']>>;
