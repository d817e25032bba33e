import { describe, expect, it } from 'vitest';
import { instantsAt, wallClock, plusDays } from './index';

describe('instantsAt', () => {
	// Changes of 29 March and 25 October 2026 in Central Europe: IANA time zone database.
	it.each([
		['2026-03-29T02:30', 0],
		['2026-10-25T02:30', 2],
		['2026-06-01T10:00', 1],
		['2026-03-29T03:00', 1],
		['nonsense', 0]
	])('%s reads so %i times', (local, times) => {
		expect(instantsAt(local, 'Europe/Stockholm')).toHaveLength(times);
	});

	it('gives the earlier of two first, an hour apart', () => {
		const [first, second] = instantsAt('2026-10-25T02:30', 'Europe/Stockholm');
		expect(second!.getTime() - first!.getTime()).toBe(3_600_000);
		expect(first!.toISOString()).toBe('2026-10-25T00:30:00.000Z');
	});

	it('is undone by wallClock', () => {
		const [instant] = instantsAt('2026-06-01T10:00', 'America/New_York');
		expect(instant!.toISOString()).toBe('2026-06-01T14:00:00.000Z');
		expect(wallClock(instant!, 'America/New_York')).toBe('2026-06-01T10:00');
	});
});

it('counts days by the wall clock, over a clock change too', () => {
	// Stockholm goes forward on 28 March 2027: that day has 23 hours.
	expect(plusDays(new Date('2027-03-27T23:00:00Z'), 1, 'Europe/Stockholm').toISOString()).toBe(
		'2027-03-28T22:00:00.000Z'
	);
});
