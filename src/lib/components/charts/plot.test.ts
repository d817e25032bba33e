import { expect, it } from 'vitest';
import { decimalsOfStep, paddedRange } from './plot';

it.each([
	[500, 0],
	[1, 0],
	[0.5, 1],
	[0.25, 2],
	[2.5, 1],
	[0.002, 3]
])('a step of %f needs %i decimals', (step, decimals) => expect(decimalsOfStep(step)).toBe(decimals));

it('gives a flat line room on both sides', () => {
	expect(paddedRange(null, 100, 100)).toEqual([95, 105]);
	expect(paddedRange(null, 0, 0)).toEqual([-0.5, 0.5]);
	expect(paddedRange(null, null, null)).toEqual([0, 1]);
});
