import { describe, expect, it } from 'vitest';
import { cursorHref, isNumeric, nextSort, readSort, sortHref, type Column } from './columns';

const POWER: Column = { key: 'power', head: 'Peak power', unit: 'kW', sort: 'peak_power' };
const BUILD: Column = { key: 'build', head: 'Build', sort: 'build' };
const MARK: Column = { key: 'mark', head: 'Curve' };

describe('sorting by address', () => {
	it('starts numbers with the largest and words with A', () => {
		expect(nextSort(POWER, undefined)).toEqual({ by: 'peak_power', direction: 'down' });
		expect(nextSort(BUILD, { by: 'peak_power', direction: 'down' })).toEqual({
			by: 'build',
			direction: 'up'
		});
	});
	it('turns round on the second click', () =>
		expect(nextSort(POWER, { by: 'peak_power', direction: 'down' })?.direction).toBe('up'));
	it('leaves other columns alone', () => expect(nextSort(MARK, undefined)).toBeNull());
	it('keeps filters and goes back to the first page', () => {
		const url = new URL('https://lab.example/runs?cell=C1&cursor=abc&sort=build');
		expect(sortHref(url, { by: 'peak_power', direction: 'down' })).toBe('?cell=C1&sort=-peak_power');
	});
	it('reads back what it wrote', () => {
		const sort = { by: 'peak_power', direction: 'down' } as const;
		const url = new URL(sortHref(new URL('https://lab.example/runs'), sort), 'https://lab.example/runs');
		expect(readSort(url, [BUILD, POWER])).toEqual(sort);
	});
	it('ignores a column that is not there', () =>
		expect(readSort(new URL('https://lab.example/runs?sort=password'), [BUILD, POWER])).toBeUndefined());
});

it('sets columns with a unit right', () =>
	expect([POWER, BUILD, MARK].map(isNumeric)).toEqual([true, false, false]));

it('pages with filters and sort kept', () => {
	const url = new URL('https://lab.example/runs?cell=C1&cursor=abc&sort=build');
	expect(cursorHref(url, 'def')).toBe('?cell=C1&cursor=def&sort=build');
	expect(cursorHref(url, null)).toBe('?cell=C1&sort=build');
});
