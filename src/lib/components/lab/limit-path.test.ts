import { describe, expect, it } from 'vitest';
import { limitPath } from './limit-path';

const points: [number, number][] = [
	[1000, 10],
	[2000, 30]
];

describe('a limit’s table as a picture', () => {
	it('is held flat past its ends', () => {
		// 8 % of the span past each end of 1160 wide in all: 80 of 1160 on 100 px.
		expect(limitPath(points, true, 100, 60)?.line).toBe('M0.0 50.0L6.9 50.0L93.1 10.0L100.0 10.0');
	});
	it('shades what is not allowed', () => {
		expect(limitPath(points, true, 100, 60)?.beyond).toMatch(/V0H0Z$/);
		expect(limitPath(points, false, 100, 60)?.beyond).toMatch(/V60H0Z$/);
	});
	it('draws one point as a level line, and none as nothing', () => {
		expect(limitPath([[3000, 5]], true, 100, 60)?.line).not.toContain('NaN');
		expect(limitPath([], true, 100, 60)).toBeNull();
	});
});
