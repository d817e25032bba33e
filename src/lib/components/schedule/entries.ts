import { subtractIntervals, wallSpan } from '$lib/domain/scheduling';

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
				replaces: string | null;
				rigUpMinutes: number;
				rigDownMinutes: number;
				may: readonly string[];
				version: number;
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
	/** The booking that it is, or belongs to as its rigging; of a closure its id, where this person may know it. */
	id: string | null;
	/** Set for a test: what may be known and done before its booking is opened. */
	test: DrawnTest | null;
}

export interface DrawnTest {
	number: string;
	build: string;
	client: string;
	state: 'requested' | 'confirmed' | 'done';
	replaces: string | null;
	may: readonly string[];
	version: number;
}

const MINUTE_MS = 60_000;

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
		// A booking keeps its key when it moves, so that its bar does.
		const what = entry.id ?? `${entry.cell} ${from.toISOString()}`;
		drawn.push({ ...entry, key: `${entry.kind} ${what}`, ...wallSpan({ from, to }, zone) });
	};
	const spanOf = ({ from, to }: Span) => ({ from: new Date(from), to: new Date(to) });
	for (const { code: cell, open, entries } of schedule.cells) {
		for (const shut of subtractIntervals([spanOf(schedule)], open.map(spanOf)))
			draw({ cell, kind: 'shut', title: '', id: null, test: null }, shut.from, shut.to);
		for (const entry of entries) {
			const { from, to } = spanOf(entry);
			if (entry.kind !== 'booking') {
				const [title, id] = entry.kind === 'closed' ? [entry.title ?? '', entry.id ?? null] : ['', null];
				draw({ cell, kind: entry.kind, title, id, test: null }, from, to);
				continue;
			}
			const { id, number, build, client, state, replaces, may, version, rigUpMinutes, rigDownMinutes } =
				entry;
			const test = { number, build, client, state, replaces, may, version };
			const minutesFrom = (at: Date, minutes: number) => new Date(at.getTime() + minutes * MINUTE_MS);
			const rig = { cell, title: number, id, test: null };
			draw({ ...rig, kind: 'rig_up' }, minutesFrom(from, -rigUpMinutes), from);
			draw({ cell, kind: state, title: number, id, test }, from, to);
			draw({ ...rig, kind: 'rig_down' }, to, minutesFrom(to, rigDownMinutes));
		}
	}
	return drawn;
}
