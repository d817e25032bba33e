import { expect, it } from 'vitest';
import { statusOf } from './status';

const STATES = {
	run: ['open', 'closed', 'accepted', 'voided'],
	booking: ['requested', 'confirmed', 'declined', 'cancelled', 'done'],
	trace: ['received', 'processing', 'needs_map', 'ready', 'refused'],
	flag: ['note', 'review', 'breach'],
	finding: ['info', 'warning', 'error']
} as const;

it.each(Object.entries(STATES))('%s states are told apart without colour', (kind, states) => {
	const shown = states.map((state) => statusOf(kind as keyof typeof STATES, state));
	expect(new Set(shown.map(({ word }) => word)).size).toBe(states.length);
});
it('keeps red for what is refused, wrong or crossed', () => {
	expect(statusOf('run', 'voided').tone).toBe('muted');
	expect(statusOf('flag', 'breach').tone).toBe('limit');
});
it('shows an unknown state by its name', () => expect(statusOf('run', 'on_hold').word).toBe('on hold'));
