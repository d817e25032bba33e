import published from './reference-values.json';
import textbook from './textbook-cases.json';

interface Quantity {
	value: unknown;
	unit: string;
}

export interface Entry {
	id: string;
	topic: string;
	quantity: string;
	source: string;
	kind: string;
	inputs: Record<string, Quantity>;
	output: Quantity;
	tolerance: { abs?: number; rel?: number };
}

export interface TextbookCase {
	id: string;
	source: {
		book: string;
		author: string;
		chapter: number | string;
		example: string;
		page: number | string | null;
	};
	inputs: Record<string, Quantity>;
	outputs: Record<string, { value: number; unit: string }>;
	confidence: string;
}

export const ENTRIES = published as unknown as readonly Entry[];
export const TEXTBOOK = textbook as unknown as readonly TextbookCase[];

/** A number among an entry's inputs; a missing one is a fault of the check, not a pass. */
export function input(entry: { id: string; inputs: Record<string, Quantity> }, name: string): number {
	const value = entry.inputs[name]?.value;
	if (typeof value !== 'number') throw new Error(`${entry.id} has no number ${name}`);
	return value;
}

export function inputList(entry: Entry, name: string): number[] {
	const value = entry.inputs[name]?.value;
	if (!Array.isArray(value) || !value.every((item) => typeof item === 'number'))
		throw new Error(`${entry.id} has no list ${name}`);
	return value as number[];
}

/** What our function makes of an entry. */
export interface Check {
	match: RegExp;
	run: (entry: Entry) => number | number[];
}

/** Entries that no formula of this stage covers, and why. */
export interface Uncovered {
	match: RegExp;
	reason: string;
}

/** Largest distance that the entry allows for this value. */
export function allowed(entry: Entry, value: number): number {
	const { abs, rel } = entry.tolerance;
	if (abs === undefined && rel === undefined) throw new Error(`${entry.id} states no tolerance`);
	return Math.max(abs ?? 0, (rel ?? 0) * Math.abs(value));
}
