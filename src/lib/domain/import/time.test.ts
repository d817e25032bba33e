import { describe, expect, it } from 'vitest';
import { clockForm, readClock, timeUnitBySize, unwrap } from './time';

describe('clock forms', () => {
	it.each([
		['14:40:00.020', 'clock', 52_800.02],
		['2:05:07', 'clock', 7507],
		['02:05:07 pm', 'clock', 50_707],
		['00:00:01,5', 'clock', 1.5],
		['12:34.5', 'minutes', 754.5],
		['1970-01-02T00:00:01.25Z', 'date_time', 86_401.25],
		['1970-01-02 00:00:01.25', 'date_time', 86_401.25],
		['1970-01-02T01:00:00+01:00', 'date_time', 86_400],
		['02.01.1970 00:00:03', 'date_time', 86_403],
		['1/13/1970 00:00:00', 'date_time', 12 * 86_400]
	] as const)('%s', (cell, form, seconds) => {
		expect(clockForm(cell)).toBe(form);
		expect(readClock(cell, form)).toBeCloseTo(seconds, 6);
	});
	it.each(['12.5', '20260314', 'x', ''])('“%s” is none', (cell) => expect(clockForm(cell)).toBeNull());
});

describe('unwrap', () => {
	it('counts on over midnight', () => {
		const clock = Float64Array.of(86_399, 86_399.5, 0, 0.5);
		expect(unwrap(clock, 'clock')).toBe(1);
		expect(Array.from(clock)).toEqual([86_399, 86_399.5, 86_400, 86_400.5]);
	});
	it('leaves a small step back to be reported', () => {
		const clock = Float64Array.of(100, 99, 101);
		expect(unwrap(clock, 'clock')).toBe(0);
	});
});

describe('timeUnitBySize', () => {
	it.each([
		['hundredths of a second', [0, 0.01, 0.02, 0.03], 's'],
		['Unix seconds', [1.7e9, 1.7e9 + 0.1, 1.7e9 + 0.2], 's'],
		['Unix milliseconds', [1.7e12, 1.7e12 + 20, 1.7e12 + 40], 'ms'],
		['spreadsheet days', [46_095.5, 46_095.5001, 46_095.5002], 'd']
	] as const)('%s', (_, values, unit) => expect(timeUnitBySize(Float64Array.from(values))?.unit).toBe(unit));
	it('is not told by whole small numbers: they may be seconds, milliseconds or counts', () =>
		expect(timeUnitBySize(Float64Array.of(0, 20, 40, 60))).toBeNull());
});
