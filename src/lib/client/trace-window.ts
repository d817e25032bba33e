import { getJson } from './api';

/** Lowest and highest sample of each bucket; null is a gap. Equal where a bucket holds one sample. */
interface Extremes {
	lo: (number | null)[];
	hi: (number | null)[];
}

/** A decimated part of a trace: `time` is that of each bucket's first sample, s. */
export interface TraceWindow {
	time: number[];
	series: Record<string, Extremes>;
}

/** Where a trace begins and ends; `row` where it is a table of points without a clock. */
export interface TraceExtent {
	clock: 'time' | 'row';
	from: number;
	to: number;
}

const pathOf = (run: string) => `/runs/${encodeURIComponent(run)}/trace`;

/** Fetches the window `from`–`to` (s) of the channels, in at most `points` buckets. */
export async function loadTraceWindow(
	run: string,
	trace: string,
	channels: readonly string[],
	from: number,
	to: number,
	points: number,
	signal: AbortSignal
): Promise<TraceWindow> {
	const answer = await getJson<{ time: number[]; channels: Record<string, Extremes> }>(pathOf(run), {
		query: { trace, channels: channels.join(','), from, to, points },
		signal
	});
	return { time: answer.time, series: answer.channels };
}

/** Asks for as little as there is to ask for: one channel, whole. */
export function loadTraceExtent(
	run: string,
	trace: string,
	channel: string,
	signal: AbortSignal
): Promise<TraceExtent> {
	return getJson<TraceExtent>(pathOf(run), { query: { trace, channels: channel, points: 2 }, signal });
}
