import { describe, expect, it } from 'vitest';
import type { DrawnEntry } from './entries';
import { gathered } from './gather';

const day = '2026-12-04T';
function entry(id: string, kind: DrawnEntry['kind'], from: string, to: string, cell = 'C1'): DrawnEntry {
	const isTest = kind === 'requested' || kind === 'confirmed';
	const test = {
		number: id,
		build: 'B1',
		client: 'HB',
		state: kind === 'confirmed' ? ('confirmed' as const) : ('requested' as const),
		replaces: null,
		may: [],
		version: 1
	};
	return {
		key: `${kind} ${id}`,
		cell,
		kind,
		from: day + from,
		to: day + to,
		title: id,
		id,
		test: isTest ? test : null
	};
}
const brief = (entries: readonly DrawnEntry[]) =>
	entries.map(({ title, from, to }) => `${title} ${from.slice(11)} ${to.slice(11)}`);

describe('requests for the same time', () => {
	const three = [
		entry('a', 'rig_up', '08:00', '09:00'),
		entry('a', 'requested', '09:00', '15:00'),
		entry('c', 'requested', '13:00', '19:00'),
		entry('b', 'requested', '10:00', '16:00')
	];
	it('are one bar with their count over all of their time, without their rigging', () => {
		expect(brief(gathered(three, null))).toEqual(['3 requests 09:00 19:00']);
	});
	it('stay apart where they only touch, lie in another cell, or one is being moved', () => {
		const apart = [
			entry('a', 'requested', '09:00', '12:00'),
			entry('b', 'requested', '12:00', '15:00'),
			entry('c', 'requested', '09:00', '12:00', 'C2')
		];
		expect(gathered(apart, null)).toEqual(apart);
		expect(brief(gathered(three, 'a'))).toEqual(['a 08:00 09:00', 'a 09:00 15:00', '2 requests 10:00 19:00']);
	});
	it('leave alone what holds its time', () => {
		const mixed = [entry('a', 'confirmed', '09:00', '15:00'), entry('b', 'requested', '10:00', '12:00')];
		expect(gathered(mixed, null)).toEqual(mixed);
	});
});
