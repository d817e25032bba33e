/**
 * Every colour of the application, once, as [light, dark]. `tailwind.config.ts` makes CSS variables and utilities of
 * them; charts, which paint on canvas, read them here. `tokens.test.ts` holds each used pair to WCAG AA.
 */
export type Pair = readonly [light: string, dark: string];
export type Scheme = 'light' | 'dark';

export const COLOURS = {
	ground: ['#F3F5F2', '#0E1513'],
	sheet: ['#FFFFFF', '#161F1C'],
	/** Wells, hover rows, table heads: one step below the sheet. */
	sunk: ['#E9EEEA', '#1E2925'],
	ink: ['#14201D', '#E7EEEA'],
	muted: ['#55635E', '#9FB0A9'],
	/** Hairlines that only separate. */
	rule: ['#D3DAD5', '#2A3833'],
	/** Borders that say "you can type here": 3:1 at least. */
	edge: ['#73827C', '#687B74'],
	accent: ['#005F56', '#4FC3B0'],
	'accent-tint': ['#DDEDE9', '#12332D'],
	'on-accent': ['#FFFFFF', '#06201B'],
	attention: ['#8A4B00', '#F2B45C'],
	'attention-tint': ['#FCEFD8', '#352711'],
	limit: ['#B3261E', '#FF8A80'],
	'limit-tint': ['#FBE3E0', '#3B1E1C'],
	'on-limit': ['#FFFFFF', '#2A0705'],
	good: ['#2F6B2F', '#86CF8A'],
	'good-tint': ['#E1F0DF', '#18321B']
} as const satisfies Record<string, Pair>;
export type ColourName = keyof typeof COLOURS;

/**
 * Cells: P. Tol's "muted" and "bright" qualitative sets (colour-blind safe) without their reds and oranges, which belong
 * to limit and attention; each moved in lightness only until it stands out on both grounds.
 * The order keeps the first four far apart for every kind of colour vision.
 */
export const CELL_COLOURS = [
	['#332288', '#8F84E0'],
	['#97812B', '#DDCC77'],
	['#2F86B0', '#88CCEE'],
	['#AA4499', '#CC74BD'],
	['#117733', '#4FA86A'],
	['#7F7F22', '#A8A83F'],
	['#2C8C7D', '#44AA99']
] as const satisfies readonly Pair[];

/** Chart series in order of use. Past the last one the order starts again with a dash pattern. */
const SERIES_COLOURS = [
	['#1B5FAA', '#6FB1F5'],
	['#8A2F7F', '#E08AD6'],
	['#2C7A2F', '#7CC97F'],
	['#0E7C86', '#5CC7D0'],
	['#6B6A12', '#C9C45A'],
	['#4B5955', '#AEBBB6']
] as const satisfies readonly Pair[];

const DASHES: readonly (readonly number[])[] = [[], [6, 4], [2, 3], [10, 3, 2, 3]];

const side = (scheme: Scheme) => (scheme === 'light' ? 0 : 1);

export const colour = (name: ColourName, scheme: Scheme): string => COLOURS[name][side(scheme)];

/** Colour and dash of the n-th series of a chart (n from 0). */
export function seriesStyle(n: number, scheme: Scheme): { colour: string; dash: number[] } {
	const pair = SERIES_COLOURS[n % SERIES_COLOURS.length] ?? SERIES_COLOURS[0];
	const dash = DASHES[Math.floor(n / SERIES_COLOURS.length) % DASHES.length] ?? [];
	return { colour: pair[side(scheme)], dash: [...dash] };
}

/**
 * Which of the cell colours a cell has: the number at the end of its code (`C1`, `CELL-2`), so that neighbours differ;
 * a code without one gets a stable place from its letters.
 */
export function cellHue(code: string): number {
	const ordinal = /(\d+)\D*$/.exec(code)?.[1];
	const place =
		ordinal === undefined
			? [...code].reduce((sum, letter) => (sum * 31 + letter.charCodeAt(0)) % 9973, 7)
			: Number(ordinal) + CELL_COLOURS.length - 1;
	return place % CELL_COLOURS.length;
}

const lightDark = (pair: Pair) => `light-dark(${pair[0]}, ${pair[1]})`;

/** The custom properties of `:root`; `light-dark()` follows `color-scheme`, which the theme switch sets. */
export function customProperties(): Record<string, string> {
	const named = Object.entries(COLOURS).map(([name, pair]) => [`--${name}`, lightDark(pair)] as const);
	const cells = CELL_COLOURS.map((pair, n) => [`--cell-${n}`, lightDark(pair)] as const);
	const series = SERIES_COLOURS.map((pair, n) => [`--series-${n}`, lightDark(pair)] as const);
	return Object.fromEntries([...named, ...cells, ...series]);
}
