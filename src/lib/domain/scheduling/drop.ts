import { instantsAt, wallClock } from '../time';
import type { Interval } from './intervals';

/** A stretch on the lab's wall clock, `yyyy-MM-ddTHH:mm`. */
interface WallSpan {
	from: string;
	to: string;
}

/** An entry that an autumn change turns round or to nothing on the wall clock is still to be seen. */
const LEAST_MS = 15 * 60_000;

const wallMs = (local: string) => Date.parse(`${local}Z`);

/** A slot as it is drawn on the lab's wall clock. @param zone IANA name */
export function wallSpan({ from, to }: Interval, zone: string): WallSpan {
	const start = wallClock(from, zone);
	const end = wallClock(to, zone);
	return { from: start, to: end > start ? end : wallClock(new Date(wallMs(start) + LEAST_MS), 'utc') };
}

/**
 * Where a slot stands when its bar was put down elsewhere. An end that reads as before keeps its instant, also in an hour that
 * the clock shows twice. A bar that was moved whole keeps its true length, though a clock change may lie in its new time.
 * @returns null when the clock never shows that time
 */
export function droppedSpan(slot: Interval, drop: WallSpan, zone: string): Interval | null {
	const drawn = wallSpan(slot, zone);
	const from = drop.from === drawn.from ? slot.from : instantsAt(drop.from, zone)[0];
	if (!from) return null;
	const length = (span: WallSpan) => wallMs(span.to) - wallMs(span.from);
	if (length(drop) === length(drawn))
		return { from, to: new Date(from.getTime() + slot.to.getTime() - slot.from.getTime()) };
	const to = drop.to === drawn.to ? slot.to : instantsAt(drop.to, zone)[0];
	return to ? { from, to } : null;
}
