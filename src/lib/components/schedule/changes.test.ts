import { expect, it } from 'vitest';
import { changesText } from './changes';
import type { ListedEntry } from './entries';

const entry = (kind: ListedEntry['kind'], from: number, number = '', state = 'requested'): ListedEntry => ({
	key: `${kind} ${number} ${from}`,
	cell: 'C1',
	kind,
	from: `2026-12-14T${String(from).padStart(2, '0')}:00:00Z`,
	to: `2026-12-14T${String(from + 2).padStart(2, '0')}:00:00Z`,
	title: '',
	rigUpMinutes: 0,
	rigDownMinutes: 0,
	booking: number
		? { id: number, number, state, client: 'HB', build: 'B1', buildId: 'b', buildTitle: '' }
		: null
});
const text = (before: ListedEntry[], after: ListedEntry[]) => changesText(before, after, 'Europe/Stockholm');

it('is silent when nothing changed', () => expect(text([entry('taken', 8)], [entry('taken', 8)])).toBeNull());

it('says what came, moved, was confirmed and went', () => {
	expect(text([], [entry('booking', 8, 'N-1')])).toBe('N-1 is asked for: C1, Mon 14 Dec 2026, 09:00–11:00.');
	expect(text([entry('booking', 8, 'N-1')], [entry('booking', 10, 'N-1', 'confirmed')])).toBe(
		'N-1 now stands in C1, Mon 14 Dec 2026, 11:00–13:00. N-1 is confirmed.'
	);
	expect(text([entry('booking', 8, 'N-1')], [])).toBe('N-1 is gone from these days.');
});

it('says of others’ time only that it changed', () =>
	expect(text([entry('taken', 8)], [entry('taken', 10)])).toBe('Taken time of C1 changed.'));

it('is short when much changed at once', () =>
	expect(
		text(
			[],
			['1', '2', '3', '4'].map((n) => entry('booking', 8, n))
		)
	).toMatch(/And 2 more changes\.$/));
