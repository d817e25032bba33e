import { describe, expect, it } from 'vitest';
import {
	comparisonSentence,
	differenceUnit,
	intervalText,
	meanText,
	readingOf,
	scatterText,
	signedText
} from './comparison';

const of = (value: number, low: number, high: number) => ({ value, ci95: [low, high] as const });

describe('differences', () => {
	it('have a digit more than one run, a sign, and points where percentages differ', () => {
		expect(meanText('bte_max', 0.34567)).toBe('34.567');
		expect(signedText('peak_power', 1.5)).toBe('+1.500');
		expect(signedText('peak_power', -1.5)).toBe('−1.500');
		expect(signedText('peak_power', 0.00001)).toBe('0.000');
		expect(intervalText('peak_power', [1, 2])).toBe('1.000 to 2.000');
		expect(differenceUnit('bte_max')).toBe('percentage points');
		expect(differenceUnit('peak_power')).toBe('kW');
	});

	it('are read off their interval', () => {
		expect(readingOf(of(2, 1, 3))).toBe('higher');
		expect(readingOf(of(-2, -3, -1))).toBe('lower');
		expect(readingOf(of(1, -1, 3))).toBe('not shown');
		expect(readingOf(null)).toBe('unknown');
	});

	it('make a sentence that always has interval and n', () => {
		const base = { key: 'A', n: 3 };
		expect(comparisonSentence('bte_max', { key: 'B', n: 2, difference: of(0.01, 0.004, 0.016) }, base)).toBe(
			'B is higher than A by 1.000 percentage points (95 % interval +0.400 to +1.600 percentage points, n = 2 and 3): more than scatter.'
		);
		expect(comparisonSentence('peak_power', { key: 'B', n: 2, difference: of(1, -1, 3) }, base)).toBe(
			'No difference between B and A is shown beyond scatter (95 % interval −1.000 to +3.000 kW, n = 2 and 3).'
		);
		expect(comparisonSentence('peak_power', { key: 'B', n: 1, difference: null }, base)).toContain(
			'n = 1 and 3'
		);
	});

	it('are in the reader’s units, and a difference of temperatures moves to no other zero', () => {
		expect(meanText('coolant_temp_max', 90, 'us')).toBe('194.00');
		expect(scatterText('coolant_temp_max', 1, 'us')).toBe('1.80');
		expect(signedText('coolant_temp_max', 10, 'us')).toBe('+18.00');
		expect(intervalText('peak_power', [74.57, 149.14], 'us')).toBe('100.000 to 200.000');
		expect(differenceUnit('peak_power', '', 'us')).toBe('hp');
		const group = { key: 'B', n: 3, difference: of(7.457, 3.7285, 11.1855) };
		expect(comparisonSentence('peak_power', group, { key: 'A', n: 4 }, 'us')).toBe(
			'B is higher than A by 10.000 hp (95 % interval +5.000 to +15.000 hp, n = 3 and 4): more than scatter.'
		);
	});
});
