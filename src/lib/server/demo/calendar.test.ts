import { describe, expect, it } from 'vitest';
import { labTime } from './calendar';

const zone = 'Europe/Stockholm';
const at = (begun: string, workday: number, clock = '09:00') =>
	labTime(new Date(begun), zone, workday, clock).toISOString();

describe('working days of the lab', () => {
	it('count from the day on which the lab was begun', () => {
		// A Wednesday.
		expect(at('2027-03-10T15:00:00Z', 0)).toBe('2027-03-10T08:00:00.000Z');
		expect(at('2027-03-10T15:00:00Z', 2)).toBe('2027-03-12T08:00:00.000Z');
		expect(at('2027-03-10T15:00:00Z', 3)).toBe('2027-03-15T08:00:00.000Z');
		expect(at('2027-03-10T15:00:00Z', -3)).toBe('2027-03-05T08:00:00.000Z');
	});

	it('start on Monday where it was begun at a weekend, by the clock of the lab', () => {
		// Friday 23:30 UTC is Saturday there.
		expect(at('2027-03-12T23:30:00Z', 0)).toBe('2027-03-15T08:00:00.000Z');
		expect(at('2027-03-12T23:30:00Z', -1)).toBe('2027-03-12T08:00:00.000Z');
	});

	it('keep the clock of the lab over a change of summer time', () => {
		// Summer time began there on Sunday 2027-03-28.
		expect(at('2027-03-26T10:00:00Z', 0)).toBe('2027-03-26T08:00:00.000Z');
		expect(at('2027-03-26T10:00:00Z', 1)).toBe('2027-03-29T07:00:00.000Z');
	});
});
