import type { MetricValue } from '../model';

/** Where on the run a figure occurs. */
export interface Place {
	/** For evaluators to find the same place again: a speed, or a row. */
	key: number;
	at: NonNullable<MetricValue['at']>;
}

export interface PlacedValue extends Place {
	value: number;
	/** Standard uncertainty by scatter (type A); null where nothing tells it. */
	u: number | null;
}

/**
 * How one kind of run finds the extremes of its reduced data: a local fit over a curve, the rows of a table, means of a log.
 */
export interface Places {
	method: string;
	/** Highest (`1`) or lowest (`-1`) value of a channel; null where it has none. */
	peak(code: string, sign: 1 | -1): PlacedValue | null;
	/** A channel's value at a place found before. */
	valueAt(code: string, place: Place): { value: number; u: number | null } | null;
	codes(): readonly string[];
}
