import { clockText } from '$lib/domain/display/clock';
import { drawnStretch, plusMinutes, subtractIntervals, type Interval } from '$lib/domain/scheduling';

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
				buildTitle: string;
				rigUpMinutes: number;
				rigDownMinutes: number;
		  }
		| { kind: 'taken' }
		| { kind: 'closed'; title?: string | undefined }
	);
/** A cell's day, as far as it is drawn. */
export interface LaneCell {
	open: readonly Span[];
	entries: readonly Entry[];
	runs: readonly { number: string; from: string; to: string | null }[];
}

/** Places along the lane are parts of its width, `12.5%`, so that it needs no measuring and no style. */
interface Bar {
	key: string;
	kind: 'confirmed' | 'done' | 'requested' | 'rig' | 'taken' | 'closed' | 'shut' | 'run';
	x: string;
	width: string;
	/** Where the bar has room for it. */
	label: string;
	/** Said in full. */
	title: string;
	href: string | null;
}

export const spanOf = ({ from, to }: Span): Interval => ({ from: new Date(from), to: new Date(to) });

/** The stretch of the day that all lanes share. */
export function sharedStretch(day: Interval, cells: readonly LaneCell[], now: Date): Interval {
	const things = cells.flatMap(({ open, entries, runs }) => [
		// Open round the clock says nothing about which part of the day is worth drawing.
		...open.map(spanOf).filter(({ from, to }) => from > day.from || to < day.to),
		...entries.map((entry) =>
			entry.kind === 'booking'
				? {
						from: plusMinutes(new Date(entry.from), -entry.rigUpMinutes),
						to: plusMinutes(new Date(entry.to), entry.rigDownMinutes)
					}
				: spanOf(entry)
		),
		...runs.map(({ from, to }) => ({ from: new Date(from), to: to ? new Date(to) : now }))
	]);
	return drawnStretch(day, things, now);
}

const percent = (share: number) => `${Number((share * 100).toFixed(3))}%`;

/** How far along the stretch an instant lies. */
export const placeOf = (at: Date, { from, to }: Interval): string =>
	percent((at.getTime() - from.getTime()) / (to.getTime() - from.getTime()));

const BOOKING_WORDS = { requested: 'requested', confirmed: 'confirmed', done: 'done' } as const;

/** All that is drawn in a lane, what lies below first. */
export function barsOf(cell: LaneCell, stretch: Interval, now: Date, zone: string): Bar[] {
	const bars: Bar[] = [];
	const times = (from: Date, to: Date) => `${clockText(from, zone)}–${clockText(to, zone)}`;
	const draw = (bar: Pick<Bar, 'kind' | 'label' | 'title' | 'href'>, span: Interval) => {
		const from = span.from < stretch.from ? stretch.from : span.from;
		const to = span.to > stretch.to ? stretch.to : span.to;
		if (to <= from) return;
		const share = (to.getTime() - from.getTime()) / (stretch.to.getTime() - stretch.from.getTime());
		bars.push({
			...bar,
			key: `${bar.kind} ${bar.label} ${span.from.toISOString()}`,
			x: placeOf(from, stretch),
			width: percent(share)
		});
	};
	for (const shut of subtractIntervals([stretch], cell.open.map(spanOf)))
		draw(
			{ kind: 'shut', label: '', title: `Outside opening hours, ${times(shut.from, shut.to)}`, href: null },
			shut
		);
	for (const entry of cell.entries) {
		const span = spanOf(entry);
		if (entry.kind !== 'booking') {
			const what = entry.kind === 'closed' ? 'Closed' : 'Taken';
			const named = entry.kind === 'closed' && entry.title ? `${what}: ${entry.title}` : what;
			draw(
				{ kind: entry.kind, label: named, title: `${named}, ${times(span.from, span.to)}`, href: null },
				span
			);
			continue;
		}
		const rig = (title: string, part: Interval) => draw({ kind: 'rig', label: '', title, href: null }, part);
		if (entry.state !== 'requested') {
			rig(`Rig-up for ${entry.number}`, {
				from: plusMinutes(span.from, -entry.rigUpMinutes),
				to: span.from
			});
			rig(`Rig-down after ${entry.number}`, {
				from: span.to,
				to: plusMinutes(span.to, entry.rigDownMinutes)
			});
		}
		draw(
			{
				kind: entry.state,
				label: entry.number,
				title: `${entry.number}, ${times(span.from, span.to)}, ${BOOKING_WORDS[entry.state]}: ${entry.buildTitle}`,
				href: `/bookings/${entry.id}`
			},
			span
		);
	}
	for (const { number, from, to } of cell.runs) {
		const start = new Date(from);
		const end = to ? new Date(to) : now;
		draw(
			{
				kind: 'run',
				label: number,
				title: `Run ${number}, ${to ? times(start, end) : `since ${clockText(start, zone)}`}`,
				href: `/runs/${encodeURIComponent(number)}`
			},
			// A record that was just opened is to be seen, too.
			{ from: start, to: end > plusMinutes(start, 5) ? end : plusMinutes(start, 5) }
		);
	}
	return bars;
}

const STEPS_H = [1, 2, 3, 4, 6];
const MOST_TICKS = 7;
const HOUR_MS = 3_600_000;

/** Full hours along the stretch, few enough to be read on a phone. */
export function ticksOf(stretch: Interval, zone: string): { x: string; label: string }[] {
	const hours = (stretch.to.getTime() - stretch.from.getTime()) / HOUR_MS;
	const step = STEPS_H.find((each) => hours / each <= MOST_TICKS) ?? 6;
	const ticks: { x: string; label: string }[] = [];
	for (let at = stretch.from.getTime(); at < stretch.to.getTime(); at += step * HOUR_MS)
		ticks.push({ x: placeOf(new Date(at), stretch), label: clockText(new Date(at), zone) });
	return ticks;
}
