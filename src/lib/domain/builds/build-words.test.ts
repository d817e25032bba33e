import { describe, expect, it } from 'vitest';
import { buildChangesInWords } from './build-words';

describe('what was changed on a build', () => {
	it('tells state, title and each part', () =>
		expect(
			buildChangesInWords(
				{
					state: 'in_preparation',
					title: 'Old',
					parts: [
						{ name: 'Jet', value: '120' },
						{ name: 'Sump', value: '' }
					]
				},
				{ state: 'ready', title: 'New', parts: [{ name: 'Jet', value: '125' }] }
			)
		).toBe('State in preparation → ready; Title “Old” → “New”; Jet 120 → 125; Sump fitted → not fitted'));
	it('tells only what the change names', () =>
		expect(
			buildChangesInWords({ state: 'ready', parts: [{ name: 'Jet', value: '1' }] }, { state: 'retired' })
		).toBe('State ready → retired'));
});
