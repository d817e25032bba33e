import { describe, expect, it } from 'vitest';
import { partProblems, partsOf, partsText } from './parts-text';

const TYPED = 'Camshafts: 264° / 10.2 mm\n\n  Ignition map : G3: road  \nSump';

describe('parts as text', () => {
	it('takes the first colon as the end of the name', () =>
		expect(partsOf(TYPED)).toEqual([
			{ name: 'Camshafts', value: '264° / 10.2 mm' },
			{ name: 'Ignition map', value: 'G3: road' },
			{ name: 'Sump', value: '' }
		]));
	it('comes back from its own text', () =>
		expect(partsOf(partsText(partsOf(TYPED)))).toEqual(partsOf(TYPED)));
	it('has nothing against usual parts', () => expect(partProblems(TYPED)).toEqual([]));
	it.each([
		[': 12 mm', 'Part 1 has no name before its colon.'],
		[`Sump\n${'x'.repeat(81)}`, 'The name of part 2 is longer than 80 characters.'],
		[`Sump: ${'x'.repeat(501)}`, 'What part 1 is takes more than 500 characters.'],
		['a\n'.repeat(201), 'At most 200 parts; these are 201.']
	])('refuses instead of cutting: %#', (text, sentence) => expect(partProblems(text)).toEqual([sentence]));
});
