import { describe, expect, it } from 'vitest';
import { minutesOf } from './intervals';
import { openIntervals } from './opening-hours';

const utc = (text: string) => new Date(`${text}Z`);
const zone = 'Europe/Stockholm';
const weekdays = [1, 2, 3, 4, 5].map((day) => ({ day, from: '07:00', to: '18:00' }));
const said = (list: { from: Date; to: Date }[]) =>
	list.map(({ from, to }) => `${from.toISOString().slice(0, 16)} ${to.toISOString().slice(0, 16)}`);

describe('opening hours', () => {
	it('are always, where a cell has none', () => {
		const within = { from: utc('2026-03-01T00:00'), to: utc('2026-03-02T00:00') };
		expect(openIntervals(null, within, zone)).toEqual([within]);
	});

	it('follow the wall clock over the day that loses an hour', () => {
		const days = [6, 7, 1].map((day) => ({ day, from: '07:00', to: '18:00' }));
		const open = openIntervals(days, { from: utc('2026-03-28T00:00'), to: utc('2026-03-31T00:00') }, zone);
		expect(said(open)).toEqual([
			'2026-03-28T06:00 2026-03-28T17:00',
			'2026-03-29T05:00 2026-03-29T16:00',
			'2026-03-30T05:00 2026-03-30T16:00'
		]);
	});

	it.each([
		['2026-03-29', 23],
		['2026-10-25', 25],
		['2026-06-14', 24]
	])('of a whole Sunday are as long as the day is: %s, %i h', (day, hours) => {
		const within = { from: utc(`${day}T00:00`), to: utc(`${day}T23:59`) };
		const around = { from: new Date(+within.from - 864e5), to: new Date(+within.to + 864e5) };
		const [open] = openIntervals([{ day: 7, from: '00:00', to: '24:00' }], around, zone);
		expect(minutesOf(open!)).toBe(hours * 60);
	});

	it('take a reading that the spring jump leaves out as the jump', () => {
		const around = { from: utc('2026-03-28T12:00'), to: utc('2026-03-29T12:00') };
		const opens = openIntervals([{ day: 7, from: '02:30', to: '06:00' }], around, zone);
		const closes = openIntervals([{ day: 7, from: '00:00', to: '02:30' }], around, zone);
		expect(said(opens)).toEqual(['2026-03-29T01:00 2026-03-29T04:00']);
		expect(said(closes)).toEqual(['2026-03-28T23:00 2026-03-29T01:00']);
	});

	it('open at the first and close at the last reading of the hour that autumn repeats', () => {
		const around = { from: utc('2026-10-24T12:00'), to: utc('2026-10-25T12:00') };
		const open = openIntervals([{ day: 7, from: '02:15', to: '02:45' }], around, zone);
		expect(said(open)).toEqual(['2026-10-25T00:15 2026-10-25T01:45']);
	});

	it('are cut to the stretch that is asked about, and join over midnight', () => {
		const open = openIntervals(
			[
				{ day: 1, from: '06:00', to: '24:00' },
				{ day: 2, from: '00:00', to: '05:00' }
			],
			{ from: utc('2026-06-01T10:00'), to: utc('2026-06-02T12:00') },
			zone
		);
		expect(said(open)).toEqual(['2026-06-01T10:00 2026-06-02T03:00']);
	});

	it('are none on a day that is not listed', () => {
		const sunday = { from: utc('2026-06-07T00:00'), to: utc('2026-06-07T20:00') };
		expect(openIntervals(weekdays, sunday, zone)).toEqual([]);
	});
});
