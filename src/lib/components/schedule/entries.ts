import { wallClock } from '$lib/domain/time';
import { subtractIntervals } from '$lib/domain/scheduling';

/** The schedule as the server reads it, as far as it is drawn. */
interface Span {
	from: string;
	to: string;
}
type Entry = Span &
	(
		| {
				kind: 'booking';
				id: string;
				number: string;
				state: 'requested' | 'confirmed' | 'done';
				client: string;
				build: string;
				buildId: string;
				buildTitle: string;
				rigUpMinutes: number;
				rigDownMinutes: number;
		  }
		| { kind: 'taken' }
		| { kind: 'closed'; id?: string | undefined; title?: string | undefined }
	);
interface Schedule extends Span {
	cells: { code: string; name: string; open: Span[]; entries: Entry[] }[];
}

/** What stands in the list under the calendar. */
export interface ListedEntry {
	key: string;
	cell: string;
	kind: Entry['kind'];
	from: string;
	to: string;
	/** Title of a closure, where this person may read it. */
	title: string;
	rigUpMinutes: number;
	rigDownMinutes: number;
	booking: {
		id: string;
		number: string;
		state: string;
		client: string;
		build: string;
		buildId: string;
		buildTitle: string;
	} | null;
}

/** What stands in the calendar: times are the lab's wall clock, without an offset. */
export interface DrawnEntry {
	key: string;
	cell: string;
	kind: 'requested' | 'confirmed' | 'done' | 'rig_up' | 'rig_down' | 'taken' | 'closed' | 'shut';
	from: string;
	to: string;
	title: string;
	/** Address of the booking. */
	href: string | null;
}

const MINUTE_MS = 60_000;
/** An entry that an autumn change turns round or to nothing on the wall clock is still to be seen. */
const LEAST_MINUTES = 15;

const laterOnTheWall = (local: string, minutes: number) =>
	wallClock(new Date(Date.parse(`${local}Z`) + minutes * MINUTE_MS), 'utc');

/** All entries of all cells, earliest first. */
export function listedEntries(schedule: Schedule): ListedEntry[] {
	return schedule.cells
		.flatMap(({ code, entries }) =>
			entries.map((entry): ListedEntry => {
				const isBooking = entry.kind === 'booking';
				return {
					key: `${code} ${isBooking ? entry.id : entry.kind} ${entry.from}`,
					cell: code,
					kind: entry.kind,
					from: entry.from,
					to: entry.to,
					title: entry.kind === 'closed' ? (entry.title ?? '') : '',
					rigUpMinutes: isBooking ? entry.rigUpMinutes : 0,
					rigDownMinutes: isBooking ? entry.rigDownMinutes : 0,
					booking: isBooking
						? {
								id: entry.id,
								number: entry.number,
								state: entry.state,
								client: entry.client,
								build: entry.build,
								buildId: entry.buildId,
								buildTitle: entry.buildTitle
							}
						: null
				};
			})
		)
		.sort((a, b) => a.from.localeCompare(b.from) || a.cell.localeCompare(b.cell));
}

/** The same as bars and shades, with rigging before and after each test and the hours at which a cell is not open. */
export function drawnEntries(schedule: Schedule, zone: string): DrawnEntry[] {
	const drawn: DrawnEntry[] = [];
	const draw = (entry: Omit<DrawnEntry, 'from' | 'to' | 'key'>, from: Date, to: Date) => {
		if (to <= from) return;
		const start = wallClock(from, zone);
		const end = wallClock(to, zone);
		drawn.push({
			...entry,
			key: `${entry.cell} ${entry.kind} ${entry.title} ${from.toISOString()}`,
			from: start,
			to: end > start ? end : laterOnTheWall(start, LEAST_MINUTES)
		});
	};
	const spanOf = ({ from, to }: Span) => ({ from: new Date(from), to: new Date(to) });
	for (const { code: cell, open, entries } of schedule.cells) {
		for (const shut of subtractIntervals([spanOf(schedule)], open.map(spanOf)))
			draw({ cell, kind: 'shut', title: '', href: null }, shut.from, shut.to);
		for (const entry of entries) {
			const { from, to } = spanOf(entry);
			if (entry.kind !== 'booking') {
				const title = entry.kind === 'closed' ? (entry.title ?? '') : '';
				draw({ cell, kind: entry.kind, title, href: null }, from, to);
				continue;
			}
			const { number: title, rigUpMinutes, rigDownMinutes } = entry;
			const minutesFrom = (at: Date, minutes: number) => new Date(at.getTime() + minutes * MINUTE_MS);
			draw({ cell, kind: 'rig_up', title, href: null }, minutesFrom(from, -rigUpMinutes), from);
			draw({ cell, kind: entry.state, title, href: `/bookings/${entry.id}` }, from, to);
			draw({ cell, kind: 'rig_down', title, href: null }, to, minutesFrom(to, rigDownMinutes));
		}
	}
	return drawn;
}
