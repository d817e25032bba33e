import {
	absorberRemarks,
	covers,
	openIntervals,
	withRigTime,
	type OpeningHour,
	type Remark
} from '$lib/domain/scheduling';
import { may as mayDo, type Principal } from '../access';
import type { Trx } from '../db';
import type { Deps } from '../deps';
import { clashesOf, clashSentence, clashViews, type Clash, type Wish } from './clash';
import type { Booking } from './schemas';
import { selectBookings, type BookingRow } from './select';

type Line = [number, number][] | null;

/**
 * `done` is told, not stored: a confirmed slot whose end has passed. No clock-driven job has to run for it, and no crash can
 * leave it out.
 */
export function shownState(row: { state: string; during: { to: Date } }, now: Date): Booking['state'] {
	return row.state === 'confirmed' && row.during.to <= now ? 'done' : (row.state as Booking['state']);
}

function remarksOn(row: BookingRow, clashes: Clash[], zone: string): Remark[] {
	const taken = withRigTime(row.during, row.rigUpMinutes, row.rigDownMinutes);
	const open = openIntervals(row.openingHours as OpeningHour[] | null, taken, zone);
	const remarks: Remark[] = clashes.length ? [{ code: 'clash', message: clashSentence(clashes, zone) }] : [];
	if (!open.some((stretch) => covers(stretch, taken)))
		remarks.push({
			code: 'outside_hours',
			message: `${row.cell} is not open for all of this time, rigging included.`
		});
	if (row.fuelMissing)
		remarks.push({
			code: 'fuel_not_plumbed',
			message: `The fuel of batch ${row.fuelBatch} is not plumbed in ${row.cell}.`
		});
	if (row.buildState !== 'ready')
		remarks.push({
			code: 'build_not_ready',
			message: `Build ${row.build} is ${row.buildState === 'retired' ? 'retired' : 'still in preparation'}.`
		});
	const absorber = {
		kind: row.absorberKind,
		maxPowerKw: row.maxPowerKw,
		maxTorqueNm: row.maxTorqueNm,
		maxSpeedRpm: row.maxSpeedRpm,
		envelope: row.envelope as Line,
		gear: row.gear
	};
	const engine = { maxSpeedRpm: row.engineMaxSpeedRpm, expectedTorque: row.expectedTorque as Line };
	for (const { code, message } of absorberRemarks(absorber, engine, row.kind as Booking['kind']))
		remarks.push({ code: `absorber_${code}`, message: `${row.cell}: ${message}.` });
	return remarks;
}

/** Managers act on every booking; an engineer on what they asked for themselves; a client's people on their client's. */
export function mayChange(who: Principal, requestedBy: string): boolean {
	return mayDo(who, 'booking.decide') || who.role === 'client' || requestedBy === who.personId;
}

type Standing = Pick<BookingRow, 'state' | 'during' | 'requestedById'>;

/** How a booking stands now, and what this person may do with it. */
export function standingOf(row: Standing, who: Principal, now: Date) {
	const state = shownState(row, now);
	return { state, may: actionsOn(row, state, who, now) };
}

function actionsOn(row: Standing, state: Booking['state'], who: Principal, now: Date): Booking['may'] {
	const open = state === 'requested' || state === 'confirmed';
	const own = mayChange(who, row.requestedById);
	const decides = mayDo(who, 'booking.decide') && state === 'requested';
	return [
		...(decides && row.during.to > now ? (['confirm'] as const) : []),
		...(decides ? (['decline'] as const) : []),
		...(open && own && mayDo(who, 'booking.cancel') ? (['cancel'] as const) : []),
		// Anyone who moves bookings may ask for another time of a confirmed slot.
		...(open && (own || state === 'confirmed') && mayDo(who, 'booking.move') ? (['move'] as const) : [])
	];
}

function toBooking(row: BookingRow, clashes: Clash[], who: Principal, deps: Deps): Booking {
	const now = deps.now();
	const { state, may } = standingOf(row, who, now);
	const ahead = (state === 'requested' || state === 'confirmed') && row.during.to > now;
	return {
		id: row.id,
		number: row.number,
		state,
		client: row.client,
		clientName: row.clientName,
		cell: row.cell,
		cellName: row.cellName,
		build: row.build,
		buildId: row.buildId,
		buildTitle: row.buildTitle,
		engine: row.engine,
		fuelBatch: row.fuelBatch,
		kind: row.kind as Booking['kind'],
		purpose: row.purpose,
		from: row.during.from.toISOString(),
		to: row.during.to.toISOString(),
		rigUpMinutes: row.rigUpMinutes,
		rigDownMinutes: row.rigDownMinutes,
		replaces: row.replaces,
		moveRequest: row.moveRequest,
		reason: row.reason,
		requestedBy: row.requestedBy ?? '',
		requestedAt: row.requestedAt.toISOString(),
		decidedBy: row.decidedBy,
		decidedAt: row.decidedAt?.toISOString() ?? null,
		warnings: ahead ? remarksOn(row, clashes, deps.config.labTimeZone) : [],
		clashesWith: clashViews(clashes),
		may,
		version: row.version
	};
}

/** Views of these rows; one question for all of them asks what stands where the requests among them want to. */
export async function bookingViews(
	trx: Trx,
	deps: Deps,
	who: Principal,
	rows: BookingRow[]
): Promise<Booking[]> {
	const now = deps.now();
	const wishes = rows
		.filter((row) => row.state === 'requested' && row.during.to > now)
		.map((row): Wish => ({
			key: row.id,
			cellId: row.cellId,
			buildId: row.buildId,
			during: withRigTime(row.during, row.rigUpMinutes, row.rigDownMinutes),
			ignore: row.replacesId ? [row.replacesId] : []
		}));
	const clashes = await clashesOf(trx, who, wishes);
	return rows.map((row) => toBooking(row, clashes.get(row.id) ?? [], who, deps));
}

export async function bookingView(trx: Trx, deps: Deps, who: Principal, id: string): Promise<Booking> {
	const row = await selectBookings(trx).where('b.id', '=', id).executeTakeFirstOrThrow();
	return (await bookingViews(trx, deps, who, [row]))[0]!;
}
