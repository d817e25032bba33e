import { describe, expect, it } from 'vitest';
import { instantFromIso, instantOrDayFromIso } from './instants';
import { minutesInWords, spanInWords } from './words';

const utc = (text: string) => new Date(`${text}Z`);
const zone = 'Europe/Stockholm';

describe('times in words', () => {
	it('says the day once where both ends share it', () => {
		expect(spanInWords({ from: utc('2026-12-07T07:00'), to: utc('2026-12-07T11:30') }, zone)).toBe(
			'from Mon 7 Dec 2026 08:00 to 12:30'
		);
		expect(spanInWords({ from: utc('2026-12-07T20:00'), to: utc('2026-12-08T05:00') }, zone)).toBe(
			'from Mon 7 Dec 2026 21:00 to Tue 8 Dec 2026 06:00'
		);
	});

	it('says which of the two, in the hour that is read twice', () => {
		expect(spanInWords({ from: utc('2026-10-25T00:30'), to: utc('2026-10-25T01:30') }, zone)).toBe(
			'from Sun 25 Oct 2026 02:30 UTC+02:00 to 02:30 UTC+01:00'
		);
	});

	it.each([
		[45, '45 min'],
		[60, '1 h'],
		[1530, '1 d 1 h 30 min'],
		[0, '0 min']
	])('%i min is %s', (minutes, text) => expect(minutesInWords(minutes)).toBe(text));
});

describe('times as they are sent', () => {
	it.each([
		['2026-03-01T08:00:00+01:00', '2026-03-01T07:00:00.000Z'],
		['2026-03-01T08:00Z', '2026-03-01T08:00:00.000Z'],
		['2026-03-01T08:00:00.250+0530', '2026-03-01T02:30:00.250Z']
	])('%s is %s', (text, iso) => expect(instantFromIso(text)?.toISOString()).toBe(iso));

	it.each(['2026-03-01T08:00:00', '2026-03-01', '2026-02-30T08:00:00Z', 'tomorrow', ''])(
		'%j names no instant',
		(text) => expect(instantFromIso(text)).toBeNull()
	);

	it('a day is its first instant in the lab, also where an address turned + into a space', () => {
		expect(instantOrDayFromIso('2026-06-01', zone)?.toISOString()).toBe('2026-05-31T22:00:00.000Z');
		expect(instantOrDayFromIso('2026-03-01T08:00:00 01:00', zone)?.toISOString()).toBe(
			'2026-03-01T07:00:00.000Z'
		);
		expect(instantOrDayFromIso('2026-13-01', zone)).toBeNull();
	});
});
