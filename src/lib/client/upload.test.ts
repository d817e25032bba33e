import { expect, it } from 'vitest';
import { progressOf } from './upload';

it('tells the time left at the rate so far', () => {
	expect(progressOf(25_000_000, 100_000_000, 5_000)).toEqual({
		sentBytes: 25_000_000,
		totalBytes: 100_000_000,
		rate: 5_000_000,
		leftS: 15
	});
});
it('promises nothing before the first byte', () => expect(progressOf(0, 100, 800).leftS).toBeNull());
