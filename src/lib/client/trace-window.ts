import { getJson } from './api';

/** Lowest and highest sample of each bucket; null is a gap. Equal where a bucket holds one sample. */
export interface Extremes {
	lo: (number | null)[];
	hi: (number | null)[];
}

/** A decimated part of a trace: `time` is the middle of each bucket, s. */
export interface TraceWindow {
	time: number[];
	series: Record<string, Extremes>;
}

/** Fetches the window `from`–`to` (s) of the channels, in at most `points` buckets. */
export async function loadTraceWindow(
	run: string,
	channels: readonly string[],
	from: number,
	to: number,
	points: number,
	signal: AbortSignal
): Promise<TraceWindow> {
	const answer = await getJson<{ time: number[]; channels: Record<string, Extremes> }>(
		`/runs/${encodeURIComponent(run)}/trace`,
		{ query: { channels: channels.join(','), from, to, points }, signal }
	);
	return { time: answer.time, series: answer.channels };
}
