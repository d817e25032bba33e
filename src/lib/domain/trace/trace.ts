import type { ChannelInfo } from '../model';
import { splitCode } from '../channels/catalogue';

export interface TraceColumn extends ChannelInfo {
	/** Place in the file, from 0; null for a channel computed from others. */
	index: number | null;
	/** One value per row in `unit`; NaN where missing. */
	values: Float64Array;
}

/** A run's samples in internal units: one clock, equal-length columns. */
export interface Trace {
	/** s from trace start, never falling; null where rows are points without a clock. */
	time: Float64Array | null;
	columns: TraceColumn[];
	/** Row of the file (from 1) that each row comes from. */
	rowNumbers: Uint32Array;
	rows: number;
}

/** The column of a canonical code or own header; the first of an indexed channel where it exists only so. */
export function columnOf(trace: Trace, code: string): TraceColumn | null {
	return (
		trace.columns.find((column) => column.code === code) ??
		trace.columns.find((column) => column.code === `${code}.1`) ??
		null
	);
}

/** All columns of a channel, indexed or not. */
export function columnsOf(trace: Trace, base: string): TraceColumn[] {
	return trace.columns.filter((column) => splitCode(column.code).base === base);
}

export function channelInfo(column: TraceColumn): ChannelInfo {
	const { code, header, unit, sourceUnit, confidence } = column;
	return { code, header, unit, sourceUnit, confidence };
}
