import { describe, expect, it } from 'vitest';
import { sweptVolumeL, torqueLine, torqueText } from './torque-line';

describe('torque over speed, as typed', () => {
	it('reads rows from a sheet, a file or a letter, and puts them in order', () =>
		expect(torqueLine('3000\t180\n1000;150\n2000 170,5\n\n')).toEqual({
			points: [
				[1000, 150],
				[2000, 170.5],
				[3000, 180]
			],
			problems: []
		}));
	it.each([
		['1000;', 'Row 1: give a speed and a torque, both as plain numbers.'],
		['1000;150\nabout;3', 'Row 2: give a speed and a torque, both as plain numbers.'],
		['-5;150', 'Row 1: a speed cannot be below zero.'],
		['1000;1\n1000;2', 'The speed 1000 rev/min stands there twice.'],
		['1;1\n'.repeat(501), 'At most 500 points; these are 501.']
	])('says what is wrong with %j', (text, sentence) => expect(torqueLine(text).problems[0]).toBe(sentence));
	it('comes back from its own text', () =>
		expect(torqueLine(torqueText([[1000, 150.5]])).points).toEqual([[1000, 150.5]]));
	it('an engine of four times 86 by 86 mm sweeps two litres', () =>
		expect(sweptVolumeL(86, 86, 4)).toBeCloseTo(1.998, 3));
});
