import { sql } from 'kysely';
import { DEFERS, NO_RELEASE } from '$lib/domain/care/cautions';
import {
	absorberRemarks,
	firstFit,
	openIntervals,
	plusMinutes,
	type Interval,
	type OpeningHour
} from '$lib/domain/scheduling';
import type { RunKind } from '$lib/domain/model';
import { requireMay, type Principal } from '../access';
import { gearInForce } from '../cells';
import { rangeOf, reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import { clientFor, resolve } from '../refs';
import type { FirstFit, FirstFitWishInput } from './schemas';
import { takenByCell } from './taken';

type Line = [number, number][] | null;
const LONGEST_RIG_MINUTES = 10_080;

async function cellsFor(trx: Trx, fuelId: string | null, at: Date) {
	return trx
		.selectFrom('cell as c')
		.select([
			'c.id',
			'c.code',
			'c.name',
			'c.absorberKind',
			'c.maxPowerKw',
			'c.maxTorqueNm',
			'c.maxSpeedRpm',
			'c.envelope',
			gearInForce(sql`c.id`, sql`${at}::timestamptz`).as('gear'),
			'c.openingHours',
			'c.rigUpMinutes',
			'c.rigDownMinutes',
			sql<boolean>`${fuelId}::uuid is not null
				and exists (select from cell_fuel cf where cf.cell_id = c.id)
				and not exists (select from cell_fuel cf where cf.cell_id = c.id and cf.fuel_id = ${fuelId}::uuid)`.as(
				'fuelMissing'
			)
		])
		.orderBy('c.code')
		.execute();
}

type CellRow = Awaited<ReturnType<typeof cellsFor>>[number];
interface Engine {
	maxSpeedRpm: number | null;
	expectedTorque: Line;
}

const sentence = (text: string) => `${text.charAt(0).toUpperCase()}${text.slice(1)}.`;

/** Why the cell does not suit, whatever the time; null when it does. What is not known is said, and not taken for a fit. */
function unsuited(cell: CellRow, engine: Engine, kind: RunKind | null): string | null {
	const remarks = absorberRemarks(
		{ ...cell, kind: cell.absorberKind, envelope: cell.envelope as Line },
		engine,
		kind
	).map((remark) => remark.message);
	if (cell.fuelMissing) remarks.push('the fuel is not plumbed there');
	return remarks.length ? sentence(remarks.join('; ')) : null;
}

/** The earliest slot in each cell that suits build, fuel and opening hours; for each other cell, why not. Holds nothing. */
export async function findSlots(deps: Deps, who: Principal, wish: FirstFitWishInput): Promise<FirstFit> {
	requireMay(who, 'schedule.read');
	const now = deps.now();
	const window: Interval = { from: wish.notBefore > now ? wish.notBefore : now, to: wish.notAfter };
	if (window.to <= window.from) throw wrongField('notAfter', 'lies in the past.');
	const searched = {
		from: plusMinutes(window.from, -LONGEST_RIG_MINUTES),
		to: plusMinutes(window.to, LONGEST_RIG_MINUTES)
	};
	return reading(deps.pools, who, async (trx) => {
		const named = await clientFor(trx, who, wish.client);
		const build = await resolve(trx, 'build', wish.build, { field: 'build', clientId: named });
		const fuelId = wish.fuelBatch ? await fuelOf(trx, wish.fuelBatch, build.clientId) : null;
		const engine = await trx
			.selectFrom('build as b')
			.innerJoin('engine as e', 'e.id', 'b.engineId')
			.select(['e.maxSpeedRpm', 'e.expectedTorque'])
			.where('b.id', '=', build.id)
			.executeTakeFirstOrThrow();
		const buildTaken = await trx
			.selectFrom('occupancy')
			.select('during')
			.where('buildId', '=', build.id)
			.where(sql<boolean>`during && ${rangeOf(searched.from, searched.to)}`)
			.execute();
		const taken = await takenByCell(trx, searched);
		const slots: FirstFit['slots'] = [];
		const refused: FirstFit['refused'] = [];
		for (const cell of await cellsFor(trx, fuelId, window.from)) {
			const { code, rigUpMinutes, rigDownMinutes } = cell;
			const why = unsuited(
				cell,
				{ maxSpeedRpm: engine.maxSpeedRpm, expectedTorque: engine.expectedTorque as Line },
				wish.kind ?? null
			);
			if (why) {
				refused.push({ cell: code, reason: why });
				continue;
			}
			// No further than this cell's own rigging reaches: "it is open for …" is to speak of the wished time.
			const reach = {
				from: plusMinutes(window.from, -rigUpMinutes),
				to: plusMinutes(window.to, rigDownMinutes)
			};
			const fit = firstFit(
				{ durationMinutes: wish.durationMinutes, window, earliestRig: now },
				{
					rigUpMinutes,
					rigDownMinutes,
					open: openIntervals(cell.openingHours as OpeningHour[] | null, reach, deps.config.labTimeZone),
					taken: taken.get(cell.id) ?? []
				},
				buildTaken.map((row) => row.during)
			);
			if ('reason' in fit) refused.push({ cell: code, reason: sentence(fit.reason) });
			else
				slots.push({
					cell: code,
					cellName: cell.name,
					from: fit.slot.from.toISOString(),
					to: fit.slot.to.toISOString(),
					rigUpMinutes,
					rigDownMinutes
				});
		}
		slots.sort((a, b) => a.from.localeCompare(b.from));
		return { slots, refused, note: `${NO_RELEASE} ${DEFERS}` };
	});
}

async function fuelOf(trx: Trx, ref: string, clientId: string | null): Promise<string> {
	const batch = await resolve(trx, 'fuel_batch', ref, { field: 'fuelBatch', clientId });
	const { fuelId } = await trx
		.selectFrom('fuelBatch')
		.select('fuelId')
		.where('id', '=', batch.id)
		.executeTakeFirstOrThrow();
	return fuelId;
}
