import { describe, expect, it } from 'vitest';
import { componentsOf, componentsText } from './components-text';

const TYPED = 'Petrol; 90; 740; 43; 1.87\nEthanol\t10 %\t794\t26,8\t3\t0.5\n';

describe('components as typed', () => {
	it('reads lines from a letter or a sheet', () =>
		expect(componentsOf(TYPED)).toEqual({
			components: [
				{ name: 'Petrol', volumeFraction: 0.9, densityKgM3: 740, lhvMjKg: 43, hydrogenCarbonRatio: 1.87 },
				{
					name: 'Ethanol',
					volumeFraction: 0.1,
					densityKgM3: 794,
					lhvMjKg: 26.8,
					hydrogenCarbonRatio: 3,
					oxygenCarbonRatio: 0.5
				}
			],
			problems: []
		}));
	it('comes back from its own text', () => {
		const { components } = componentsOf(TYPED);
		expect(componentsOf(componentsText(components)).components).toEqual(components);
		expect(componentsText([{ name: 'Only', volumeFraction: 1 }])).toBe('Only; 100');
	});
	it('is nothing where nothing is typed', () =>
		expect(componentsOf(' \n')).toEqual({ components: [], problems: [] }));
	it.each([
		['Petrol; 90', 'The parts add up to 90.0 %; they must add up to 100 %.'],
		['Petrol', 'Line 1: the volume must be a number from 0 to 100.'],
		['; 100', 'Line 1: begin with a name of at most 80 characters.'],
		['Petrol; 100; 740; 43000', 'Line 1: the heating value must be a number from 1 to 142.'],
		['Petrol; 100; ; ; ; ; 7', 'Line 1 has more than six entries.']
	])('says what is wrong with %j', (text, sentence) => expect(componentsOf(text).problems[0]).toBe(sentence));
});
