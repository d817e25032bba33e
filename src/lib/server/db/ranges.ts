import { sql, type ColumnType, type RawBuilder } from 'kysely';

/** A half-open stretch of time, `[from, to)`. */
export interface InstantRange {
	from: Date;
	to: Date;
}

export type InstantRangeColumn = ColumnType<InstantRange, InstantRange, InstantRange>;

export function rangeOf(from: Date, to: Date): RawBuilder<InstantRange> {
	return sql<InstantRange>`tstzrange(${from}::timestamptz, ${to}::timestamptz, '[)')`;
}

/** A value for a jsonb column. Arrays must go as text: the driver would make PostgreSQL arrays of them. */
export function jsonb<T>(value: T): RawBuilder<T> {
	return sql<T>`${JSON.stringify(value)}::jsonb`;
}

/** PostgreSQL's text of a finite tstzrange. */
export function parseRange(text: string): InstantRange {
	const bounds = /^[[(]"?([^",]+)"?,"?([^",]+)"?[)\]]$/.exec(text);
	if (!bounds) throw new Error(`not a finite time range: ${text}`);
	return { from: instant(bounds[1]!), to: instant(bounds[2]!) };
}

/** `2026-03-01 08:00:00+00` → Date; PostgreSQL shortens a whole-hour offset, which Date refuses. */
function instant(text: string): Date {
	return new Date(text.replace(' ', 'T').replace(/([+-]\d\d)$/, '$1:00'));
}
