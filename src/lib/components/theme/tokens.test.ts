import { describe, expect, it } from 'vitest';
import { contrast } from './contrast';
import {
	CELL_COLOURS,
	COLOURS,
	cellHue,
	colour,
	customProperties,
	seriesStyle,
	type ColourName,
	type Scheme
} from './tokens';

const SCHEMES: Scheme[] = ['light', 'dark'];
const SURFACES: ColourName[] = ['ground', 'sheet', 'sunk'];

/** [foreground, background, least ratio]: 4.5 for text (WCAG 1.4.3), 3 for borders and marks (1.4.11). */
const USED: [ColourName, ColourName, number][] = [
	...SURFACES.flatMap((surface): [ColourName, ColourName, number][] => [
		['ink', surface, 7],
		['muted', surface, 4.5],
		['accent', surface, 4.5],
		['attention', surface, 4.5],
		['limit', surface, 4.5],
		['good', surface, 4.5],
		['edge', surface, 3]
	]),
	...(['accent', 'attention', 'limit', 'good'] as const).flatMap(
		(name): [ColourName, ColourName, number][] => [
			[name, `${name}-tint`, 4.5],
			['ink', `${name}-tint`, 7],
			['muted', `${name}-tint`, 4.5]
		]
	),
	['on-accent', 'accent', 4.5],
	['on-limit', 'limit', 4.5]
];

describe('contrast', () => {
	it('is 21 for black on white and 1 for a colour on itself (WCAG 2.2)', () => {
		expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 6);
		expect(contrast('#8A4B00', '#8A4B00')).toBe(1);
	});
	it('does not mind the order', () => {
		expect(contrast('#777777', '#FFFFFF')).toBeCloseTo(4.478, 3);
		expect(contrast('#FFFFFF', '#777777')).toBeCloseTo(4.478, 3);
	});
});

describe.each(SCHEMES)('%s colours', (scheme) => {
	it.each(USED)('%s on %s reach %d', (front, back, least) => {
		expect(contrast(colour(front, scheme), colour(back, scheme))).toBeGreaterThanOrEqual(least);
	});
	it.each(SURFACES)('cell and series colours stand out on %s', (surface) => {
		const back = colour(surface, scheme);
		const cells = CELL_COLOURS.map((pair) => pair[scheme === 'light' ? 0 : 1]);
		const series = [0, 1, 2, 3, 4, 5].map((n) => seriesStyle(n, scheme).colour);
		for (const front of [...cells, ...series]) expect(contrast(front, back)).toBeGreaterThanOrEqual(3);
	});
});

describe('series', () => {
	it('never gives two of the first 24 the same look', () => {
		const looks = Array.from({ length: 24 }, (_, n) => JSON.stringify(seriesStyle(n, 'light')));
		expect(new Set(looks).size).toBe(24);
	});
});

describe('cell colours', () => {
	it.each([
		['C1', 0],
		['C4', 3],
		['CELL-2', 1],
		['C8', 0]
	])('%s has colour %i', (code, hue) => expect(cellHue(code)).toBe(hue));
	it('are stable and in range without a number', () => {
		expect(cellHue('NORTH')).toBe(cellHue('NORTH'));
		expect(CELL_COLOURS[cellHue('NORTH')]).toBeDefined();
	});
});

it('writes every colour as a custom property', () => {
	const properties = customProperties();
	expect(properties['--accent']).toBe('light-dark(#005F56, #4FC3B0)');
	expect(Object.keys(properties)).toHaveLength(Object.keys(COLOURS).length + CELL_COLOURS.length + 6);
});
