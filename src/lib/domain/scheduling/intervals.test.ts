import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mergeIntervals, minutesOf, subtractIntervals, withRigTime, type Interval } from './intervals';

const at = (minute: number) => new Date(minute * 60_000);
const span = (from: number, to: number): Interval => ({ from: at(from), to: at(to) });
const minutes = (list: Interval[]) => list.map(({ from, to }) => [+from / 60_000, +to / 60_000]);

describe('intervals', () => {
	it('makes one of what overlaps or touches, and drops what is empty', () => {
		const list = [span(10, 20), span(0, 5), span(20, 30), span(4, 6), span(50, 50)];
		expect(minutes(mergeIntervals(list))).toEqual([
			[0, 6],
			[10, 30]
		]);
	});

	it('cuts out at the ends, in the middle and altogether', () => {
		const open = [span(0, 100), span(200, 300)];
		expect(minutes(subtractIntervals(open, [span(-5, 10), span(40, 60), span(190, 310)]))).toEqual([
			[10, 40],
			[60, 100]
		]);
	});

	it('leaves what is only touched', () => {
		expect(minutes(subtractIntervals([span(10, 20)], [span(0, 10), span(20, 30)]))).toEqual([[10, 20]]);
	});

	it('adds rigging before and after', () => {
		expect(minutes([withRigTime(span(100, 200), 30, 15)])).toEqual([[70, 215]]);
	});

	it('leaves exactly the minutes that are open and not taken, whatever they are', () => {
		const stretch = fc
			.tuple(fc.integer({ min: 0, max: 300 }), fc.integer({ min: 1, max: 60 }))
			.map(([from, length]) => span(from, from + length));
		const isIn = (list: Interval[], m: number) => list.some((s) => s.from <= at(m) && at(m) < s.to);
		fc.assert(
			fc.property(fc.array(stretch, { maxLength: 8 }), fc.array(stretch, { maxLength: 8 }), (open, taken) => {
				const left = subtractIntervals(open, taken);
				for (let m = 0; m < 360; m++) expect(isIn(left, m)).toBe(isIn(open, m) && !isIn(taken, m));
				expect(left.every((s) => minutesOf(s) > 0)).toBe(true);
			})
		);
	});
});
