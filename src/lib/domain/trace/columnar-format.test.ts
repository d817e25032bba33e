import { expect, it } from 'vitest';
import { floatsOf } from './columnar-format';

it('reads floats from a view into a larger buffer, as object stores hand them over', () => {
	const pool = Buffer.alloc(64);
	pool.writeDoubleLE(1.5, 8);
	pool.writeDoubleLE(-2.25, 16);
	expect([...floatsOf(pool.subarray(8, 24), 'f64')]).toEqual([1.5, -2.25]);
	// An odd address is no multiple of a float's size.
	pool.writeFloatLE(3.5, 33);
	expect([...floatsOf(pool.subarray(33, 37), 'f32')]).toEqual([3.5]);
});
