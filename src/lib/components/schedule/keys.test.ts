import { expect, it } from 'vitest';
import { afterKey } from './keys';

const place = { cell: 'C1', from: '2026-12-14T09:00', to: '2026-12-14T10:00' };
const press = (key: string, shiftKey = false, altKey = true) =>
	afterKey(place, { key, altKey, shiftKey, ctrlKey: false, metaKey: false }, ['C1', 'C2']);

it.each([
	['ArrowDown', { from: '2026-12-14T09:30', to: '2026-12-14T10:30' }],
	['ArrowUp', { from: '2026-12-14T08:30', to: '2026-12-14T09:30' }],
	['ArrowRight', { cell: 'C2' }],
	['ArrowLeft', {}],
	['PageDown', { from: '2026-12-15T09:00', to: '2026-12-15T10:00' }],
	['PageUp', { from: '2026-12-13T09:00', to: '2026-12-13T10:00' }]
])('Alt and %s', (key, change) => expect(press(key)).toEqual({ ...place, ...change }));

it('changes the end with Shift, and never to before the beginning', () => {
	expect(press('ArrowDown', true)).toEqual({ ...place, to: '2026-12-14T10:30' });
	expect(press('ArrowUp', true)).toEqual({ ...place, to: '2026-12-14T09:30' });
	const short = { ...place, to: '2026-12-14T09:30' };
	const up = { key: 'ArrowUp', altKey: true, shiftKey: true, ctrlKey: false, metaKey: false };
	expect(afterKey(short, up, ['C1'])).toEqual(short);
});

it('leaves other keys alone', () => {
	expect(press('ArrowDown', false, false)).toBeNull();
	expect(press('x')).toBeNull();
	expect(press('ArrowLeft', true)).toBeNull();
});
