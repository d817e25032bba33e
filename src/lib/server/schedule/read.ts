import { sql } from 'kysely';
import { DateTime } from 'luxon';
import {
	instantOrDayFromIso,
	mergeIntervals,
	minutesOf,
	openIntervals,
	type Interval,
	type OpeningHour
} from '$lib/domain/scheduling';
import { requireMay, type Principal } from '../access';
import { standingOf } from '../bookings';
import { rangeOf, reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import type { Schedule, ScheduleEntry, ScheduleQueryInput } from './schemas';
import { takenUnseen } from './taken';

const LONGEST_DAYS = 100;
/** No booking is longer than 31 days, and no rigging than a week on either side: what starts outside cannot reach in. */
const LONGEST_REACH = sql`interval '40 days'`;

function windowOf(query: ScheduleQueryInput, now: Date, zone: string): Interval {
	const read = (field: 'from' | 'to', absent: () => Date): Date => {
		const text = query[field];
		if (text === undefined) return absent();
		const at = instantOrDayFromIso(text, zone);
		if (!at) throw wrongField(field, 'give a day like 2026-03-01, or a time like 2026-03-01T08:00:00+01:00.');
		return at;
	};
	const from = read('from', () => DateTime.fromJSDate(now, { zone }).startOf('day').toJSDate());
	const to = read('to', () => DateTime.fromJSDate(from, { zone }).plus({ days: 7 }).toJSDate());
	if (to <= from) throw wrongField('to', 'must be later than from.');
	if (minutesOf({ from, to }) > LONGEST_DAYS * 24 * 60)
		throw wrongField('to', `must be within ${LONGEST_DAYS} days of from.`);
	return { from, to };
}

async function bookingEntries(trx: Trx, who: Principal, within: Interval, now: Date) {
	const rows = await trx
		.selectFrom('booking as b')
		.innerJoin('cell as c', 'c.id', 'b.cellId')
		.innerJoin('client as cl', 'cl.id', 'b.clientId')
		.innerJoin('build as bu', 'bu.id', 'b.buildId')
		.leftJoin('booking as old', 'old.id', 'b.replacesId')
		.select((eb) => [
			'b.cellId',
			'b.id',
			'b.number',
			'b.state',
			'b.during',
			'b.kind',
			'b.buildId',
			'b.version',
			'b.requestedBy as requestedById',
			'cl.code as client',
			'bu.number as build',
			'bu.title as buildTitle',
			'bu.state as buildState',
			'old.number as replaces',
			eb.fn.coalesce('b.rigUpMinutes', 'c.rigUpMinutes').as('rigUpMinutes'),
			eb.fn.coalesce('b.rigDownMinutes', 'c.rigDownMinutes').as('rigDownMinutes')
		])
		.where('b.state', 'in', ['requested', 'confirmed', 'done'])
		.where(
			sql<boolean>`lower(b.during) > ${within.from}::timestamptz - ${LONGEST_REACH}
			and lower(b.during) < ${within.to}::timestamptz + ${LONGEST_REACH}`
		)
		.where(
			sql<boolean>`tstzrange(lower(b.during) - make_interval(mins => coalesce(b.rig_up_minutes, c.rig_up_minutes)),
				upper(b.during) + make_interval(mins => coalesce(b.rig_down_minutes, c.rig_down_minutes)))
				&& ${rangeOf(within.from, within.to)}`
		)
		.orderBy(sql`lower(b.during)`)
		.orderBy('b.number')
		.execute();
	return rows.map(({ cellId, during, kind, requestedById, ...row }) => ({
		cellId,
		entry: {
			...row,
			kind: 'booking',
			...standingOf({ state: row.state, during, requestedById }, who, now),
			test: kind,
			from: during.from.toISOString(),
			to: during.to.toISOString()
		} as ScheduleEntry
	}));
}

async function closureEntries(trx: Trx, who: Principal, within: Interval) {
	const rows = await trx
		.selectFrom('occupancy as o')
		.select(['o.cellId', 'o.id', 'o.title', 'o.during'])
		.where('o.kind', '=', 'closure')
		.where(sql<boolean>`o.during && ${rangeOf(within.from, within.to)}`)
		.execute();
	return rows.map(({ cellId, id, title, during }) => ({
		cellId,
		entry: {
			kind: 'closed',
			...(who.clientId ? {} : { id, title: title ?? undefined }),
			from: during.from.toISOString(),
			to: during.to.toISOString()
		} as ScheduleEntry
	}));
}

const span = ({ from, to }: Interval) => ({ from: from.toISOString(), to: to.toISOString() });

/** Every cell's time as this person may see it: their own in full, others' only as taken. */
export async function readSchedule(deps: Deps, who: Principal, query: ScheduleQueryInput): Promise<Schedule> {
	requireMay(who, 'schedule.read');
	const zone = deps.config.labTimeZone;
	const now = deps.now();
	const within = windowOf(query, now, zone);
	return reading(deps.pools, who, async (trx) => {
		const cells = await trx
			.selectFrom('cell')
			.select(['id', 'code', 'name', 'colour', 'rigUpMinutes', 'rigDownMinutes', 'openingHours'])
			.orderBy('code')
			.execute();
		const bookings = await bookingEntries(trx, who, within, now);
		const closures = await closureEntries(trx, who, within);
		const unseen = await takenUnseen(trx, within);
		return {
			...span(within),
			timeZone: zone,
			cells: cells.map(({ id, openingHours, ...cell }) => ({
				...cell,
				open: openIntervals(openingHours as OpeningHour[] | null, within, zone).map(span),
				entries: [
					...[...bookings, ...closures].filter((row) => row.cellId === id).map((row) => row.entry),
					...mergeIntervals(unseen.get(id) ?? []).map((taken): ScheduleEntry => ({
						kind: 'taken',
						...span(taken)
					}))
				].sort((a, b) => a.from.localeCompare(b.from))
			}))
		};
	});
}
