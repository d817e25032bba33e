import { describe, expect, it } from 'vitest';
import { inForceAt, periodsOf, reachOf } from './periods';

const at = (day: string) => new Date(`2026-${day}T00:00:00Z`);
const made = (version: number, day: string) => ({ version, validFrom: at(day) });
const versions = [made(1, '03-01'), made(2, '06-01'), made(3, '06-01'), made(4, '01-01')];

describe('dated versions', () => {
	it('hold from their date to the next; of one date the later written; the earliest also before', () =>
		expect(
			periodsOf(versions).map(({ version, period }) => [version.version, period.from, period.to])
		).toEqual([
			[4, null, at('03-01')],
			[1, at('03-01'), at('06-01')],
			[3, at('06-01'), null]
		]));
	it.each([
		['2025-01-01', 4],
		['2026-02-28', 4],
		['2026-03-01', 1],
		['2026-05-31', 1],
		['2026-06-01', 3],
		['2030-01-01', 3]
	])('at %s version %i is in force', (day, version) =>
		expect(inForceAt(versions, new Date(`${day}T00:00:00Z`))?.version).toBe(version)
	);
	it('there is none where none was written', () => expect(inForceAt([], at('01-01'))).toBeUndefined());
	it.each([
		['02-01', at('02-01'), at('03-01')],
		['01-01', null, at('03-01')],
		['06-01', at('06-01'), null],
		['09-01', at('09-01'), null]
	])('one written now for %s reaches from %s to %s', (day, from, to) =>
		expect(reachOf(versions, at(day))).toEqual({ from, to })
	);
	it('the first holds from the beginning, whatever dates later ones are given', () =>
		expect(
			periodsOf([{ version: 1, validFrom: null }, made(2, '03-01')]).map(({ period }) => period)
		).toEqual([
			{ from: null, to: at('03-01') },
			{ from: at('03-01'), to: null }
		]));
	it('the first of all reaches everything', () =>
		expect(reachOf([], at('02-01'))).toEqual({ from: null, to: null }));
});
