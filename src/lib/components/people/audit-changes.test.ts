import { describe, expect, it } from 'vitest';
import { changesOf } from './audit-changes';

describe('what an audit line changed', () => {
	it('names the fields that differ, and leaves out those that stayed', () => {
		expect(changesOf({ name: 'Ada', role: 'builder' }, { name: 'Ada', role: 'engineer' })).toEqual([
			{ field: 'role', before: 'builder', after: 'engineer' }
		]);
	});

	it('tells a new thing by what it is', () => {
		expect(changesOf(null, { code: 'C1', maxSpeedRpm: 9000, note: null })).toEqual([
			{ field: 'code', before: null, after: 'C1' },
			{ field: 'max speed rpm', before: null, after: '9000' }
		]);
	});

	it('writes what is inside a field as text, and a bare value without a name', () => {
		expect(changesOf(null, { absorber: { kind: 'ac', maxPowerKw: 300 } })[0]!.after).toBe(
			'kind: ac, maxPowerKw: 300'
		);
		expect(changesOf('ready', 'retired')).toEqual([{ field: '', before: 'ready', after: 'retired' }]);
		expect(changesOf(null, null)).toEqual([]);
	});
});
