import { describe, expect, it } from 'vitest';
import { clashSentence } from './clash';
import type { DrawnEntry } from './entries';

const entry = (
	kind: DrawnEntry['kind'],
	cell: string,
	from: string,
	to: string,
	id: string | null = null,
	state?: 'requested' | 'confirmed'
): DrawnEntry => ({
	key: `${kind} ${cell} ${from}`,
	cell,
	kind,
	from: `2026-12-14T${from}`,
	to: `2026-12-14T${to}`,
	title: '',
	id,
	test: state
		? { number: `N-${id}`, build: `B-${id}`, client: 'HB', state, replaces: null, may: [], version: 1 }
		: null
});
const cells = [
	{ code: 'C1', rigUpMinutes: 60, rigDownMinutes: 30 },
	{ code: 'C2', rigUpMinutes: 0, rigDownMinutes: 0 }
];
const drawn = [
	entry('shut', 'C1', '00:00', '05:00'),
	entry('rig_up', 'C1', '08:00', '09:00', 'a'),
	entry('confirmed', 'C1', '09:00', '12:00', 'a', 'confirmed'),
	entry('requested', 'C1', '14:00', '16:00', 'b', 'requested'),
	entry('rig_up', 'C1', '13:00', '14:00', 'b'),
	entry('closed', 'C1', '18:00', '19:00'),
	entry('taken', 'C2', '08:00', '10:00')
];
const at = (cell: string, from: string, to: string, more = {}) =>
	clashSentence(drawn, cells, {
		cell,
		from: `2026-12-14T${from}`,
		to: `2026-12-14T${to}`,
		id: null,
		...more
	});

describe('a place on the schedule', () => {
	it('is free beside others, and over requests, which hold nothing', () => {
		expect(at('C1', '13:00', '17:00')).toBeNull();
		expect(at('C2', '10:00', '12:00')).toBeNull();
	});
	it('clashes by its own rigging and by that of others', () => {
		expect(at('C1', '12:30', '13:30')).toBe('Clashes with N-a, Mon 14 Dec 2026, 09:00–12:00.');
		expect(at('C1', '06:00', '08:00')).toMatch(/^Clashes with the rig-up of N-a/);
		expect(at('C1', '17:00', '17:45')).toMatch(/^Clashes: C1 is closed Mon 14 Dec 2026, 18:00–19:00\.$/);
	});
	it('says no more than taken where no more is known', () =>
		expect(at('C2', '09:00', '11:00')).toBe('Clashes: C2 is taken Mon 14 Dec 2026, 08:00–10:00.'));
	it('does not clash with itself, nor with the slot that it replaces', () => {
		expect(at('C1', '10:00', '13:00', { id: 'a' })).toBeNull();
		expect(at('C1', '10:00', '13:00', { id: 'c', replaces: 'N-a' })).toBeNull();
	});
	it('clashes where its build stands elsewhere', () =>
		expect(at('C2', '11:00', '12:00', { build: 'B-a' })).toBe(
			'Clashes: build B-a stands in C1 then, for N-a.'
		));
	it('is told to reach outside the opening hours', () =>
		expect(at('C1', '05:30', '06:00')).toBe('Reaches outside the opening hours of C1, rigging included.'));
});
