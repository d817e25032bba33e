import { describe, expect, it } from 'vitest';
import { listing } from './listing';

const rows = [
	{ code: 'B', power: 60 },
	{ code: 'A', power: 220 },
	{ code: 'C', power: 160 }
];
const sorts = { code: (row: (typeof rows)[0]) => row.code, power: (row: (typeof rows)[0]) => row.power };
const shown = (query: string, size?: number) => {
	const { items, nextCursor, total } = listing(rows, new URL(`http://lab.example/?${query}`), sorts, size);
	return [items.map(({ code }) => code).join(''), nextCursor, total];
};

describe('a short list as its address asks for it', () => {
	it.each([
		['', 'BAC'],
		['sort=code', 'ABC'],
		['sort=-power', 'ACB'],
		['sort=nothing', 'BAC'],
		['cursor=x', 'BAC'],
		['cursor=99', 'BAC']
	])('%s', (query, codes) => expect(shown(query)).toEqual([codes, null, 3]));
	it('in pages', () => {
		expect(shown('sort=code', 2)).toEqual(['AB', '2', 3]);
		expect(shown('sort=code&cursor=2', 2)).toEqual(['C', null, 3]);
	});
});
