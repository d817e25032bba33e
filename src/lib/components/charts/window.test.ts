import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { around, fit, isSame, nearest, pan, zoom } from './window';

const WHOLE = { from: 0, to: 45 };

describe('a window on a trace', () => {
	it('keeps the moment under the pointer in place', () => {
		const after = zoom({ from: 10, to: 20 }, 0.5, 12);
		expect(after).toEqual({ from: 11, to: 16 });
		expect((12 - after.from) / (after.to - after.from)).toBeCloseTo(0.2, 12);
	});
	it('comes back after zooming in and out', () => {
		expect(isSame(zoom(zoom({ from: 10, to: 20 }, 0.5, 13), 2, 13), { from: 10, to: 20 })).toBe(true);
	});
	it('stops at the end without growing or shrinking', () => {
		expect(fit(pan({ from: 30, to: 40 }, 1), WHOLE, 0.1)).toEqual({ from: 35, to: 45 });
		expect(fit(pan({ from: 3, to: 13 }, -1), WHOLE, 0.1)).toEqual({ from: 0, to: 10 });
	});
	it('shows no less than a few samples', () => {
		const shown = fit({ from: 20, to: 20.001 }, WHOLE, 0.1);
		expect(shown.to - shown.from).toBeCloseTo(0.1, 12);
	});
	it('never leaves the trace, whatever is asked', () => {
		const time = fc.double({ min: -1e4, max: 1e4, noNaN: true });
		fc.assert(
			fc.property(time, time, (a, b) => {
				const shown = fit({ from: Math.min(a, b), to: Math.max(a, b) }, WHOLE, 0.1);
				expect(shown.from).toBeGreaterThanOrEqual(WHOLE.from - 1e-9);
				expect(shown.to).toBeLessThanOrEqual(WHOLE.to + 1e-9);
				expect(shown.to - shown.from).toBeGreaterThanOrEqual(0.1 - 1e-9);
			})
		);
	});
	it('gives a moment room to be seen', () => {
		expect(around([18, 18])).toEqual({ from: 17.5, to: 18.5 });
		expect(around([12, 15])).toEqual({ from: 11, to: 16 });
	});
});

describe('the bucket nearest to a time', () => {
	it.each([
		[-5, 0],
		[0.4, 0],
		[0.6, 1],
		[2.9, 3],
		[99, 4]
	])('of 0 … 4 s to %f s is %i', (wanted, index) => expect(nearest([0, 1, 2, 3, 4], wanted)).toBe(index));
	it('is none when there are none', () => expect(nearest([], 1)).toBeNull());
});
