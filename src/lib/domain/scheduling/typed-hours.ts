import type { OpeningHour } from './opening-hours';

export const WEEKDAYS = [
	'Monday',
	'Tuesday',
	'Wednesday',
	'Thursday',
	'Friday',
	'Saturday',
	'Sunday'
] as const;

const STRETCH = /^(\d{1,2})(?:[:.](\d\d))?\s*(?:[-–—]|to)\s*(\d{1,2})(?:[:.](\d\d))?$/i;

function clockOf(hour: string, minute = '00'): string | null {
	const [h, m] = [Number(hour), Number(minute)];
	const isRight = m < 60 && (h < 24 || (h === 24 && m === 0));
	return isRight ? `${hour.padStart(2, '0')}:${minute}` : null;
}

/**
 * One day's hours as people write them: `06:30–20:00`, `7-12, 13-17.30`; nothing: shut all day.
 * @param day ISO weekday, 1 = Monday
 * @returns the stretches, or a sentence that says what cannot be read
 */
export function readHours(day: number, text: string): { hours: OpeningHour[] } | { error: string } {
	const hours: OpeningHour[] = [];
	for (const part of text.split(/[,;]/).map((piece) => piece.trim())) {
		if (!part) continue;
		const match = STRETCH.exec(part);
		const from = match && clockOf(match[1]!, match[2]);
		const to = match && clockOf(match[3]!, match[4]);
		if (!from || !to) return { error: `“${part}” cannot be read. Write hours like 06:30–20:00.` };
		if (from >= to) return { error: `It opens at ${from} and closes at ${to}: the end must be later.` };
		const last = hours.at(-1);
		if (last && last.to > from)
			return { error: `${from}–${to} begins before ${last.to}, when the stretch before it ends.` };
		hours.push({ day, from, to });
	}
	return { hours };
}

/** A week's hours as seven texts, Monday first. */
export const typedHours = (hours: readonly OpeningHour[]): string[] =>
	WEEKDAYS.map((_, at) =>
		hours
			.filter(({ day }) => day === at + 1)
			.map(({ from, to }) => `${from}–${to}`)
			.sort()
			.join(', ')
	);
