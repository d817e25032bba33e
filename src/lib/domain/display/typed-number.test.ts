import { describe, expect, it } from 'vitest';
import { pastedPairs, typedNumber, typedPairs, wholePairs } from './typed-number';

describe('a typed number', () => {
	it.each([
		['110', 110],
		[' 1 200,5 ', 1200.5],
		['−0.31', -0.31],
		['1e-3', 0.001],
		['.5', 0.5],
		['1\u202F250', 1250],
		['0,3142', 0.3142]
	])('%s is %d', (text, value) => expect(typedNumber(text)).toBe(value));
	it('is none where nothing is typed', () => expect(typedNumber('  ')).toBeNull());
	it.each(['abc', '1,200', '1.2.3', '12 kW', '1,2,3', '--1'])('“%s” is not guessed', (text) =>
		expect(typedNumber(text)).toBeNaN()
	);
});

describe('a pasted table', () => {
	const rows = [
		{ x: '600', y: '300' },
		{ x: '1200', y: '480,5' }
	];
	it.each([
		['a sheet', '600\t300\r\n1200\t480,5\r\n'],
		['semicolons', '600;300\n1200; 480,5'],
		['blanks', '600  300\n\n1200 480,5'],
		['commas and blanks', '600, 300\n1200, 480,5']
	])('from %s', (_, text) => expect(pastedPairs(text)).toEqual(rows));
	it('from commas', () => expect(pastedPairs('600,300\n1200,480')[0]).toEqual(rows[0]));
	it('keeps what cannot be parted', () => expect(pastedPairs('600')).toEqual([{ x: '600', y: '' }]));
	it('draws the rows that are whole', () =>
		expect(wholePairs([...rows, { x: '1300', y: '' }, { x: 'x', y: '1' }])).toEqual([
			[600, 300],
			[1200, 480.5]
		]));
	it('comes back from its own text', () => expect(wholePairs(typedPairs([[1.5, -2]]))).toEqual([[1.5, -2]]));
});
