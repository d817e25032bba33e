import { DateTime } from 'luxon';

const OFFSET = /(?:[zZ]|[+-]\d\d(?::?\d\d)?)$/;

/**
 * An instant from ISO 8601 text that says its offset (`2026-03-01T08:00+01:00`, `…Z`), to the millisecond; null when it is
 * none or leaves the offset out.
 */
export function instantFromIso(text: string): Date | null {
	const trimmed = text.trim();
	if (!trimmed.includes('T') || !OFFSET.test(trimmed)) return null;
	const read = DateTime.fromISO(trimmed, { setZone: true });
	return read.isValid ? read.toJSDate() : null;
}

/** As `instantFromIso`, and also a plain day (`2026-03-01`): its first instant in the lab's zone. */
export function instantOrDayFromIso(text: string, zone: string): Date | null {
	// An unescaped + of an address arrives as a space.
	const trimmed = text.trim().replace(/ (\d\d:?\d\d)$/, '+$1');
	if (!/^\d{4}-\d\d-\d\d$/.test(trimmed)) return instantFromIso(trimmed);
	const day = DateTime.fromISO(trimmed, { zone });
	return day.isValid ? day.startOf('day').toJSDate() : null;
}
