/** What part of a trace is shown, s on the trace clock. */
export interface Window {
	from: number;
	to: number;
}

/** Keeps a window inside the trace and no narrower than `least` seconds; its length is kept where it can be. */
export function fit(window: Window, whole: Window, least: number): Window {
	const length = Math.min(Math.max(window.to - window.from, least), whole.to - whole.from);
	const middle = (window.from + window.to) / 2;
	const from = Math.min(Math.max(middle - length / 2, whole.from), whole.to - length);
	return { from, to: from + length };
}

/** Zooms by `factor` (< 1 shows less) and leaves the moment `about` where it is on the screen. */
export function zoom(window: Window, factor: number, about = (window.from + window.to) / 2): Window {
	return { from: about - (about - window.from) * factor, to: about + (window.to - about) * factor };
}

/** Moves by a share of what is shown; the length stays, also at the ends. */
export function pan(window: Window, share: number): Window {
	const by = (window.to - window.from) * share;
	return { from: window.from + by, to: window.to + by };
}

/** A span with a third of its length of context on each side, or a second where it is a moment. */
export function around([from, to]: readonly [number, number]): Window {
	const margin = Math.max((to - from) / 3, 0.5);
	return { from: from - margin, to: to + margin };
}

export function isSame(a: Window, b: Window): boolean {
	const hair = 1e-6 * Math.max(a.to - a.from, b.to - b.from);
	return Math.abs(a.from - b.from) <= hair && Math.abs(a.to - b.to) <= hair;
}

/** Index of the time nearest to `wanted` in rising times; null when there are none. */
export function nearest(times: readonly number[], wanted: number): number | null {
	if (times.length === 0) return null;
	let low = 0;
	let high = times.length - 1;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if ((times[middle] ?? Infinity) <= wanted) low = middle;
		else high = middle;
	}
	const distance = (index: number) => Math.abs((times[index] ?? Infinity) - wanted);
	return distance(low) <= distance(high) ? low : high;
}
