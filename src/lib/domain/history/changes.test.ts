import { describe, expect, it } from 'vitest';
import { changedFields, changesInWords } from './changes';

const text = (value: unknown) => (value == null ? 'not known' : `${String(value)} L`);

describe('what a change changed', () => {
	it('names only the fields whose values differ, whatever the order of their keys', () =>
		expect(
			changedFields(
				{ a: 1, b: { x: 1, y: [1, 2] }, c: null as number | null, d: 4 },
				{ a: 1, b: { y: [1, 2], x: 1 }, c: 2 }
			)
		).toEqual(['c']));
	it('takes null and absent as the same', () =>
		expect(changedFields<{ a?: number | null }>({}, { a: null })).toEqual([]));
	it('sees a longer list', () => expect(changedFields({ a: [1] }, { a: [1, 2] })).toEqual(['a']));
	it('says it in words, in the order of the words', () =>
		expect(
			changesInWords(
				{ size: null, other: 1, same: 3 },
				{ other: 2, size: 2, same: 3, unknown: 1 },
				{
					size: { label: 'Displacement', text },
					other: { label: 'Sump', text },
					same: { label: 'Same', text }
				}
			)
		).toBe('Displacement not known → 2 L; Sump 1 L → 2 L'));
});
