import { DateTime } from 'luxon';
import { isRunning, plusMinutes, type Interval } from '$lib/domain/scheduling';
import { requireMay, type Principal } from '../access';
import { listBookings, type Booking } from '../bookings';
import { reading } from '../db';
import type { Deps } from '../deps';
import { listRuns } from '../runs';
import { readSchedule, type Schedule } from '../schedule';
import type { Today } from './schemas';
import { countClosed, selectBoardRuns, type BoardRun } from './select';
import { isHeld, occupiedFrom, spanOf, workOfBooking, workOfRun, type Entry } from './work';

const DAYS_AHEAD = 7;
const PAGE = 200;
/** Enough to begin with; the count beside it and a link tell the rest. */
const LISTED = 6;

async function everyBooking(
	deps: Deps,
	who: Principal,
	query: { from?: string; to?: string; state?: 'requested' }
): Promise<Booking[]> {
	const all: Booking[] = [];
	let cursor: string | undefined;
	do {
		const page = await listBookings(deps, who, { ...query, limit: PAGE, cursor });
		all.push(...page.items);
		cursor = page.nextCursor ?? undefined;
	} while (cursor);
	return all.sort((a, b) => a.from.localeCompare(b.from));
}

/** Runs that were made in a slot: those that say so, and those of its build in its cell at that time that say nothing. */
function runsOf(booking: Booking, runs: readonly BoardRun[]): BoardRun[] {
	const from = plusMinutes(new Date(booking.from), -booking.rigUpMinutes);
	const to = new Date(booking.to);
	return runs.filter(
		(run) =>
			run.bookingId === booking.id ||
			(run.bookingId === null &&
				run.cell === booking.cell &&
				run.view.buildId === booking.buildId &&
				run.startedAt >= from &&
				run.startedAt < to)
	);
}

interface Board {
	day: Interval;
	now: Date;
	bookings: readonly Booking[];
	runs: readonly BoardRun[];
}

function laneOf(cell: Schedule['cells'][number], board: Board): Today['cells'][number] {
	const { day, now } = board;
	const touches = ({ from, to }: Interval) => to > day.from && from < day.to;
	const inDay = (entry: Entry) => {
		const rigDown = entry.kind === 'booking' ? entry.rigDownMinutes : 0;
		return touches({ from: occupiedFrom(entry), to: plusMinutes(new Date(entry.to), rigDown) });
	};
	const entries = cell.entries.filter(inDay);
	const slots = board.bookings.filter(
		(booking) => booking.cell === cell.code && (booking.state === 'confirmed' || booking.state === 'done')
	);
	const works = slots.map((booking) => {
		const runs = runsOf(booking, board.runs);
		return { span: spanOf(booking), runs, work: workOfBooking(booking, runs, entries, now) };
	});
	const inSlots = new Set(works.flatMap(({ runs }) => runs));
	const here = board.runs.filter((run) => run.cell === cell.code);
	const alone = here.filter((run) => !inSlots.has(run));
	const isOn = ({ span, runs }: (typeof works)[number]) =>
		(span.from <= now && span.to > now) || runs.some((run) => isRunning(run, now));
	const held = entries.find((entry) => entry.kind !== 'booking' && covers(entry, now));
	const following = cell.entries.find(
		(entry) => entry.kind !== 'closed' && isHeld(entry) && new Date(entry.from) > now
	);
	return {
		code: cell.code,
		name: cell.name,
		open: cell.open.filter((open) => touches(spanOf(open))),
		entries,
		runs: here.filter(({ startedAt }) => startedAt >= day.from).map(({ view }) => view),
		on: [
			...works.filter(isOn).map(({ work }) => work),
			...alone.filter((run) => isRunning(run, now)).map((run) => workOfRun(run, now))
		],
		held:
			held && held.kind !== 'booking'
				? { kind: held.kind, title: held.kind === 'closed' ? (held.title ?? null) : null, to: held.to }
				: null,
		next: following ? nextOf(following, works) : null,
		earlier: [
			...works.filter((one) => !isOn(one) && one.span.to <= now).map(({ work }) => work),
			...alone
				.filter((run) => run.startedAt >= day.from && !isRunning(run, now))
				.map((run) => workOfRun(run, now))
		].filter(({ needs }) => needs.length > 0)
	};
}

const covers = (entry: Entry, at: Date) => new Date(entry.from) <= at && new Date(entry.to) > at;

function nextOf(
	entry: Entry,
	works: readonly { work: Today['cells'][number]['on'][number] }[]
): Today['cells'][number]['next'] {
	if (entry.kind === 'closed') return null;
	const { kind, from, to } = entry;
	const work = kind === 'booking' ? works.find((one) => one.work.booking?.id === entry.id)?.work : null;
	return { kind, from, to, work: work ?? null };
}

/** Soonest first, each build once. */
function buildsNeeded(bookings: readonly Booking[], now: Date): Today['buildsNeeded'] {
	const needed = new Map<string, Today['buildsNeeded'][number]>();
	for (const { build, buildId, buildTitle, client, number, cell, from, to, state, warnings } of bookings)
		if (
			state === 'confirmed' &&
			new Date(to) > now &&
			!needed.has(buildId) &&
			warnings.some(({ code }) => code === 'build_not_ready')
		)
			needed.set(buildId, { build, buildId, buildTitle, client, booking: number, cell, from });
	return [...needed.values()];
}

/** The day in every cell and what waits for someone, as this person may see it. */
export async function readToday(deps: Deps, who: Principal): Promise<Today> {
	requireMay(who, 'schedule.read');
	const now = deps.now();
	const zone = deps.config.labTimeZone;
	const start = DateTime.fromJSDate(now, { zone }).startOf('day');
	const day = { from: start.toJSDate(), to: start.plus({ days: 1 }).toJSDate() };
	const week = { from: day.from.toISOString(), to: start.plus({ days: DAYS_AHEAD }).toUTC().toISO()! };
	const [schedule, bookings, asked, runs, counts, flagged, toReview] = await Promise.all([
		readSchedule(deps, who, week),
		everyBooking(deps, who, week),
		everyBooking(deps, who, { state: 'requested', from: now.toISOString() }),
		reading(deps.pools, who, (trx) => selectBoardRuns(trx, day)),
		reading(deps.pools, who, countClosed),
		listRuns(deps, who, { state: 'closed', flagged: true, limit: LISTED }),
		listRuns(deps, who, { state: 'closed', flagged: false, limit: LISTED })
	]);
	const board = { day, now, bookings, runs };
	const withCell = (run: BoardRun) => ({ ...run.view, cell: run.cell });
	return {
		at: now.toISOString(),
		from: day.from.toISOString(),
		to: day.to.toISOString(),
		timeZone: zone,
		cells: schedule.cells.map((cell) => laneOf(cell, board)),
		requests: { count: asked.length, items: asked.slice(0, LISTED) },
		buildsNeeded: buildsNeeded(bookings, now),
		flagged: { count: counts.flagged, items: flagged.items },
		toReview: { count: counts.plain, items: toReview.items },
		leftOpen: runs.filter((run) => run.isOpen && !isRunning(run, now)).map(withCell),
		toMap: runs.filter(({ unmapped }) => unmapped > 0).map(withCell)
	};
}
