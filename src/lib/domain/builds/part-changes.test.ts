import { describe, expect, it } from 'vitest';
import { changesInWords, partChanges } from './part-changes';

const parent = [
	{ name: 'Camshafts', value: '264°' },
	{ name: 'Intake runners', value: '310 mm' },
	{ name: 'Flywheel', value: 'steel' }
];
const child = [
	{ name: 'Camshafts', value: '264°' },
	{ name: 'Intake runners', value: '240 mm' },
	{ name: 'Restrictor', value: '32 mm' }
];

describe('what a build changes', () => {
	it('shows differences first and what stayed last', () =>
		expect(partChanges(child, parent)).toEqual([
			{
				key: 'Intake runners#1',
				name: 'Intake runners',
				value: '240 mm',
				before: '310 mm',
				change: 'changed'
			},
			{ key: 'Restrictor#1', name: 'Restrictor', value: '32 mm', before: null, change: 'added' },
			{ key: 'Flywheel#1', name: 'Flywheel', value: null, before: 'steel', change: 'removed' },
			{ key: 'Camshafts#1', name: 'Camshafts', value: '264°', before: '264°', change: 'same' }
		]));
	it('pairs parts of one name by their order', () => {
		const rows = partChanges(
			[
				{ name: 'Piston', value: 'A' },
				{ name: 'Piston', value: 'C' }
			],
			[
				{ name: 'Piston', value: 'A' },
				{ name: 'Piston', value: 'B' }
			]
		);
		expect(rows.map(({ value, before, change }) => [value, before, change])).toEqual([
			['C', 'B', 'changed'],
			['A', 'A', 'same']
		]);
	});
	it('takes a part whose value is empty as present', () =>
		expect(partChanges([{ name: 'Sump', value: '' }], [])[0]?.change).toBe('added'));
	it('counts in words', () => {
		expect(changesInWords(partChanges(child, parent))).toBe('1 changed, 1 added, 1 removed');
		expect(changesInWords(partChanges(parent, parent))).toBe('nothing changed');
	});
});
