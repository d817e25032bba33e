import { describe, expect, it } from 'vitest';
import { droppedSpan, wallSpan } from './drop';

// Clocks of Central Europe change on 28 March and 31 October 2027: IANA time zone database.
const ZONE = 'Europe/Stockholm';
const slot = (from: string, to: string) => ({ from: new Date(from), to: new Date(to) });
const plain = slot('2027-03-02T08:00:00Z', '2027-03-02T12:00:00Z');
const iso = (span: ReturnType<typeof droppedSpan>) =>
	span && [span.from.toISOString().slice(0, 16), span.to.toISOString().slice(0, 16)];

describe('a bar that was put down', () => {
	it('stands where the wall clock says', () =>
		expect(iso(droppedSpan(plain, { from: '2027-03-02T10:30', to: '2027-03-02T14:30' }, ZONE))).toEqual([
			'2027-03-02T09:30',
			'2027-03-02T13:30'
		]));

	it('keeps the end that was not dragged', () =>
		expect(iso(droppedSpan(plain, { from: '2027-03-02T09:00', to: '2027-03-02T15:00' }, ZONE))).toEqual([
			'2027-03-02T08:00',
			'2027-03-02T14:00'
		]));

	it('is as long as before where the clocks go forward, and where they go back', () => {
		expect(iso(droppedSpan(plain, { from: '2027-03-28T01:00', to: '2027-03-28T05:00' }, ZONE))).toEqual([
			'2027-03-28T00:00',
			'2027-03-28T04:00'
		]);
		expect(iso(droppedSpan(plain, { from: '2027-10-31T01:00', to: '2027-10-31T05:00' }, ZONE))).toEqual([
			'2027-10-30T23:00',
			'2027-10-31T03:00'
		]);
	});

	it('is refused at a time that the clock never shows', () => {
		expect(droppedSpan(plain, { from: '2027-03-28T02:30', to: '2027-03-28T06:30' }, ZONE)).toBeNull();
		expect(droppedSpan(plain, { from: '2027-03-28T01:00', to: '2027-03-28T02:30' }, ZONE)).toBeNull();
	});

	it('put back where it was is the same slot, also from the second of two like hours', () => {
		for (const one of [
			slot('2027-10-31T01:30:00Z', '2027-10-31T03:00:00Z'),
			slot('2027-10-31T00:30:00Z', '2027-10-31T01:15:00Z')
		])
			expect(droppedSpan(one, wallSpan(one, ZONE), ZONE)).toEqual(one);
	});
});
