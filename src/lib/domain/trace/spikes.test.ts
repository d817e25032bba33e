import { describe, expect, it } from 'vitest';
import { findSpikes } from './spikes';

/** Even noise without a random source: a long-period sequence between −1 and 1. */
const noise = (i: number) => ((i * 7919) % 1009) / 504.5 - 1;
const quiet = (length: number, level: (i: number) => number) =>
	Float64Array.from({ length }, (_, i) => level(i) + noise(i));

describe('findSpikes', () => {
	it.each([
		['one sample', [500], 300],
		['three samples', [500, 501, 502], 300],
		['a drop to zero', [700], -200],
		['the first sample', [0], 300],
		['the last sample', [999], 300]
	])('finds %s', (_, rows, jump) => {
		const values = quiet(1000, (i) => 200 + 0.05 * i);
		for (const row of rows) values[row] = values[row]! + jump;
		expect(findSpikes(values)).toEqual(rows);
	});

	it.each([
		['noise', quiet(5000, () => 200)],
		['a ramp', quiet(5000, (i) => 0.2 * i)],
		['steps', quiet(5000, (i) => 100 * Math.floor(i / 500))],
		['a pulse of 10 samples', quiet(5000, (i) => (i >= 2000 && i < 2010 ? 300 : 100))],
		['a constant', new Float64Array(1000).fill(6000)],
		[
			'square waves',
			Float64Array.from({ length: 2400 }, (_, i) => [90, 0, -60, 0][Math.floor(i / 160) % 4]!)
		],
		[
			'a channel that stands still after a while',
			quiet(400, () => 430).map((value, i) => (i > 120 ? 428 : value))
		],
		['coarse steps of the recorder', quiet(3000, () => 430).map((value) => Math.round(value / 2) * 2)]
	])('leaves %s alone', (_, values) => expect(findSpikes(values)).toEqual([]));

	it('judges a sparse channel on its own samples', () => {
		const values = Float64Array.from({ length: 2000 }, (_, i) => (i % 5 === 0 ? 20 + 0.1 * noise(i) : NaN));
		values[1000] = 60;
		expect(findSpikes(values)).toEqual([1000]);
	});
});
