/**
 * Time columns: clocks and dates become seconds; which column is the clock, and what its numbers count.
 */
import { DateTime } from 'luxon';

/** How the cells of a time-like column are written. */
export type ClockForm = 'clock' | 'minutes' | 'date_time';

const CLOCK = /^(\d{1,3}):(\d{2}):(\d{2})(?:[.,:](\d{1,9}))?\s*([ap]m)?$/i;
const MINUTES = /^(\d{1,3}):(\d{2})[.,](\d{1,9})$/;
const ISO =
	/^\d{4}-?\d{2}-?\d{2}(?:[T ]\s*\d{2}:?\d{2}(?::?\d{2}(?:[.,]\d{1,9})?)?)?\s*(?:Z|[+-]\d{2}:?\d{2})?$/;
const DAY_FIRST =
	/^(\d{1,2})([./-])(\d{1,2})\2(\d{2,4})[ ,T]+(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,](\d{1,9}))?)?\s*([ap]m)?$/i;

const fraction = (digits: string | undefined) => (digits ? Number(`0.${digits}`) : 0);

function hours(text: string, half: string | undefined): number {
	const hour = Number(text);
	if (!half) return hour;
	return (hour % 12) + (half.toLowerCase() === 'pm' ? 12 : 0);
}

/** Which of the clock forms a cell has; null for anything else (a plain number too). */
export function clockForm(cell: string): ClockForm | null {
	const text = cell.trim();
	if (CLOCK.test(text)) return 'clock';
	if (MINUTES.test(text)) return 'minutes';
	if (DAY_FIRST.test(text)) return 'date_time';
	return ISO.test(text) && /[-:T]/.test(text) ? 'date_time' : null;
}

/** `dd.mm.yyyy` and `mm/dd/yyyy`: only differences count, so an order that both halves allow may be either. */
function readDayFirst(match: RegExpExecArray): number {
	const first = Number(match[1]);
	const second = Number(match[3]);
	const dayFirst = match[2] === '.' || first > 12 || (match[2] === '-' && second <= 12);
	const year = Number(match[4]);
	const at = DateTime.utc(
		year < 100 ? 2000 + year : year,
		dayFirst ? second : first,
		dayFirst ? first : second,
		hours(match[5]!, match[9]),
		Number(match[6]),
		Number(match[7] ?? 0)
	);
	return at.isValid ? at.toSeconds() + fraction(match[8]) : NaN;
}

function readIso(text: string): number {
	const at = DateTime.fromISO(
		text
			.replace(/^(\S+) +/, '$1T')
			.replace(',', '.')
			.replace(/\s+/g, ''),
		{ zone: 'utc' }
	);
	return at.isValid ? at.toSeconds() : NaN;
}

/**
 * Seconds of one cell: since midnight (`clock`), since the full hour (`minutes`) or since 1970 (`date_time`).
 * Wraps past midnight or past the hour are taken out later, by `unwrap`.
 */
export function readClock(cell: string, form: ClockForm): number {
	const text = cell.trim();
	if (form === 'clock') {
		const match = CLOCK.exec(text);
		if (!match) return NaN;
		return hours(match[1]!, match[5]) * 3600 + Number(match[2]) * 60 + Number(match[3]) + fraction(match[4]);
	}
	if (form === 'minutes') {
		const match = MINUTES.exec(text);
		return match ? Number(match[1]) * 60 + Number(match[2]) + fraction(match[3]) : NaN;
	}
	const dayFirst = DAY_FIRST.exec(text);
	return dayFirst ? readDayFirst(dayFirst) : readIso(text);
}

const WRAP_S: Record<ClockForm, number | null> = { clock: 86_400, minutes: 3600, date_time: null };

/**
 * Takes the wraps out of a clock that starts again at midnight (or at the hour), in place.
 * A step back by more than half the wrap is a wrap; a smaller one is a fault of the file and is left to be reported.
 *
 * @returns how many wraps were taken out
 */
export function unwrap(seconds: Float64Array, form: ClockForm): number {
	const wrapS = WRAP_S[form];
	if (wrapS === null) return 0;
	let offset = 0;
	let wraps = 0;
	let last = NaN;
	for (let i = 0; i < seconds.length; i++) {
		const raw = seconds[i]!;
		if (Number.isNaN(raw)) continue;
		if (raw < last - wrapS / 2) {
			offset += wrapS;
			wraps++;
		}
		last = raw;
		seconds[i] = raw + offset;
	}
	return wraps;
}

/** Middle step between neighbouring finite values, over at most some thousands of them; NaN with fewer than two. */
export function medianStep(values: Float64Array): number {
	const steps: number[] = [];
	const stride = Math.max(1, Math.floor(values.length / 4000));
	for (let i = 1; i < values.length; i += stride) {
		const step = values[i]! - values[i - 1]!;
		if (Number.isFinite(step) && step > 0) steps.push(step);
	}
	if (steps.length === 0) return NaN;
	steps.sort((a, b) => a - b);
	return steps[steps.length >> 1]!;
}

/** What the numbers of a time column without a unit count, where their size leaves no doubt; null where it does. */
export function timeUnitBySize(values: Float64Array): { unit: 's' | 'ms' | 'd' } | null {
	let first = NaN;
	for (const value of values)
		if (!Number.isNaN(value)) {
			first = value;
			break;
		}
	const step = medianStep(values);
	if (Number.isNaN(first) || Number.isNaN(step)) return null;
	// Unix seconds and milliseconds of this half-century, and a spreadsheet's day numbers.
	if (first > 9e8 && first < 4e9) return { unit: 's' };
	if (first > 9e11 && first < 4e12) return { unit: 'ms' };
	if (first > 25_000 && first < 80_000 && step < 0.01) return { unit: 'd' };
	const whole = values.every((value) => Number.isNaN(value) || Number.isInteger(value));
	if (!whole && step <= 2) return { unit: 's' };
	return null;
}

/** How well a column serves as the clock of the trace: the share of its steps that go forward; 0 where it never moves. */
export function forwardShare(values: Float64Array): number {
	let forward = 0;
	let steps = 0;
	let last = NaN;
	for (let i = 0; i < values.length; i++) {
		const value = values[i]!;
		if (Number.isNaN(value)) continue;
		if (!Number.isNaN(last)) {
			steps++;
			if (value > last) forward++;
		}
		last = value;
	}
	return steps === 0 ? 0 : forward / steps;
}
