import { describe, expect, it } from 'vitest';
import { againstSpecification } from './specification';

describe('a batch against its fuel’s specification', () => {
	const verdict = (value: number, u?: number) =>
		againstSpecification({ lhvMjKg: { value, u } }, { lhvMjKg: { min: 42, max: 43 } })[0]!.verdict;
	it.each([
		[42.5, undefined, 'inside'],
		[42, undefined, 'inside'],
		[43, 0, 'inside'],
		[41.99, undefined, 'outside'],
		[43.5, 0.1, 'outside'],
		// Within two standard uncertainties of the limit, on either side of it.
		[42.9, 0.1, 'near'],
		[43.1, 0.1, 'near'],
		[42.8, 0.1, 'inside'],
		[43.2, 0.1, 'outside']
	])('%d ± %s is %s', (value, u, expected) => expect(verdict(value, u)).toBe(expected));
	it('takes one open side', () =>
		expect(
			againstSpecification({ ron: { value: 94 } }, { ron: { min: 95 } }).map(({ sentence }) => sentence)
		).toEqual(['Research octane number is 94.0; the fuel asks for at least 95.0.']));
	it('says what is not known, and nothing where nothing is asked', () => {
		expect(againstSpecification({}, { ron: { min: 95 } })[0]).toMatchObject({ verdict: 'unknown' });
		expect(againstSpecification({ ron: { value: 1 } }, { ron: {} })).toEqual([]);
	});
});
