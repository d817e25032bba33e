import { describe, expect, it } from 'vitest';
import { dayText, labMidnightMs, minutesText, momentText, plainDayText, slotText, zoneText } from './clock';

const BERLIN = 'Europe/Berlin';

describe('the lab’s clock', () => {
	it('shows the lab’s day, not UTC’s', () => {
		expect(dayText('2026-12-08T23:30:00Z', BERLIN)).toBe('Wed 9 Dec 2026');
		expect(dayText('2026-12-08T23:30:00Z', 'Etc/UTC')).toBe('Tue 8 Dec 2026');
	});
	it('says a plain day of an address, and leaves alone what is none', () =>
		expect(['2026-12-08', '2026-13-01', 'spring'].map(plainDayText)).toEqual([
			'8 Dec 2026',
			'2026-13-01',
			'spring'
		]));
	it('begins a day at the lab’s midnight', () =>
		expect(new Date(labMidnightMs(Date.UTC(2026, 6, 1), BERLIN)).toISOString()).toBe(
			'2026-06-30T22:00:00.000Z'
		));
	it('follows summer time', () => {
		expect(momentText('2026-07-01T07:05:00Z', BERLIN)).toBe('Wed 1 Jul 2026, 09:05');
		expect(momentText(new Date('2026-12-01T07:05:00Z'), BERLIN)).toBe('Tue 1 Dec 2026, 08:05');
	});
	it('says which of two readings an autumn hour is', () => {
		expect(momentText('2026-10-25T00:30:00Z', BERLIN)).toBe('Sun 25 Oct 2026, 02:30 UTC+02:00');
		expect(momentText('2026-10-25T01:30:00Z', BERLIN)).toBe('Sun 25 Oct 2026, 02:30 UTC+01:00');
		expect(momentText('2026-10-25T02:00:00Z', BERLIN)).toBe('Sun 25 Oct 2026, 03:00');
		expect(momentText('2026-10-24T23:59:00Z', BERLIN)).toBe('Sun 25 Oct 2026, 01:59');
	});
	it('says nothing of the kind where spring leaves an hour out', () => {
		expect(momentText('2026-03-29T01:00:00Z', BERLIN)).toBe('Sun 29 Mar 2026, 03:00');
		expect(momentText('2026-03-29T00:59:00Z', BERLIN)).toBe('Sun 29 Mar 2026, 01:59');
	});
	it('knows midnight and zones of half hours', () => {
		expect(momentText('2026-12-07T18:30:00Z', 'Asia/Kolkata')).toBe('Tue 8 Dec 2026, 00:00');
	});
	it('says a day once', () => {
		expect(slotText('2026-12-08T08:00:00Z', '2026-12-08T13:00:00Z', BERLIN)).toBe(
			'Tue 8 Dec 2026, 09:00–14:00'
		);
		expect(slotText('2026-12-08T08:00:00Z', '2026-12-09T13:00:00Z', BERLIN)).toBe(
			'Tue 8 Dec 2026, 09:00 – Wed 9 Dec 2026, 14:00'
		);
	});
	it('writes a zone’s name with spaces', () =>
		expect(zoneText('Europe/Isle_of_Man')).toBe('Europe/Isle of Man'));
	it.each([
		[0, '0 min'],
		[45, '45 min'],
		[120, '2 h'],
		[150, '2 h 30 min']
	])('%i minutes: %s', (minutes, text) => expect(minutesText(minutes)).toBe(text));
});
