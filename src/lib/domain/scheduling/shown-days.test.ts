import { describe, expect, it } from 'vitest';
import { isDay, offsetText, shownDays } from './shown-days';

const ZONE = 'Europe/Stockholm';
/** Already Tuesday at the lab. */
const now = new Date('2026-12-07T23:30:00Z');

describe('the days that a schedule shows', () => {
	it('are the week from Monday that today lies in, on the lab’s calendar', () =>
		expect(shownDays('week', '', now, ZONE)).toEqual({
			view: 'week',
			first: '2026-12-07',
			end: '2026-12-14',
			day: '2026-12-08',
			today: '2026-12-08',
			previous: '2026-12-01',
			next: '2026-12-15'
		}));

	it('are one day, across the end of a month', () =>
		expect(shownDays('day', '2026-12-31', now, ZONE)).toMatchObject({
			first: '2026-12-31',
			end: '2027-01-01',
			previous: '2026-12-30',
			next: '2027-01-01'
		}));

	it('keep whole days where the clock changes', () =>
		expect(shownDays('week', '2027-03-28', now, ZONE)).toMatchObject({
			first: '2027-03-22',
			end: '2027-03-29'
		}));

	it.each(['', 'tomorrow', '2026-02-30', '2026-1-1', '12026-01-01'])('are today’s for "%s"', (text) => {
		expect(isDay(text)).toBe(false);
		expect(shownDays('day', text, now, ZONE).first).toBe('2026-12-08');
	});
});

it.each([
	['2026-12-08T12:00:00Z', '+01:00'],
	['2026-07-08T12:00:00Z', '+02:00']
])('the lab is ahead at %s by %s', (at, offset) => expect(offsetText(new Date(at), ZONE)).toBe(offset));
