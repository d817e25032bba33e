/** A half-open stretch of time `[from, to)`; an instant is a Date (UTC inside). */
export interface Interval {
	from: Date;
	to: Date;
}

const MINUTE_MS = 60_000;

export function plusMinutes(at: Date, minutes: number): Date {
	return new Date(at.getTime() + minutes * MINUTE_MS);
}

export function minutesOf({ from, to }: Interval): number {
	return (to.getTime() - from.getTime()) / MINUTE_MS;
}

/** What a booking takes of the cell: its own time with rig-up before and rig-down after, in minutes ≥ 0. */
export function withRigTime(run: Interval, rigUpMinutes: number, rigDownMinutes: number): Interval {
	return { from: plusMinutes(run.from, -rigUpMinutes), to: plusMinutes(run.to, rigDownMinutes) };
}

export function covers(outer: Interval, inner: Interval): boolean {
	return outer.from <= inner.from && inner.to <= outer.to;
}

/** The same time as fewest stretches, in order: what overlaps or touches becomes one. */
export function mergeIntervals(list: readonly Interval[]): Interval[] {
	const merged: Interval[] = [];
	for (const next of [...list].sort((a, b) => a.from.getTime() - b.from.getTime())) {
		if (next.to <= next.from) continue;
		const last = merged.at(-1);
		if (last && next.from <= last.to) last.to = next.to > last.to ? next.to : last.to;
		else merged.push({ ...next });
	}
	return merged;
}

/** What is left of `open` when `taken` is cut out of it, in order. */
export function subtractIntervals(open: readonly Interval[], taken: readonly Interval[]): Interval[] {
	const cuts = mergeIntervals(taken);
	return mergeIntervals(open).flatMap((stretch) => {
		const left: Interval[] = [];
		let from = stretch.from;
		for (const cut of cuts) {
			if (cut.to <= from) continue;
			if (cut.from >= stretch.to) break;
			if (cut.from > from) left.push({ from, to: cut.from });
			from = cut.to;
		}
		if (from < stretch.to) left.push({ from, to: stretch.to });
		return left;
	});
}
