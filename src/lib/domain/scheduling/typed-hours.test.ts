import { describe, expect, it } from 'vitest';
import { readHours, typedHours } from './typed-hours';

describe('typed opening hours', () => {
	it.each([
		['06:30–20:00', [['06:30', '20:00']]],
		[
			'7-12, 13.15-17',
			[
				['07:00', '12:00'],
				['13:15', '17:00']
			]
		],
		['18 to 24', [['18:00', '24:00']]],
		['  ', []]
	])('%s', (text, stretches) =>
		expect(readHours(2, text)).toEqual({ hours: stretches.map(([from, to]) => ({ day: 2, from, to })) })
	);
	it.each([
		['morning', '“morning” cannot be read. Write hours like 06:30–20:00.'],
		['7:75-9', '“7:75-9” cannot be read. Write hours like 06:30–20:00.'],
		['20-6', 'It opens at 20:00 and closes at 06:00: the end must be later.'],
		['7-12, 11-17', '11:00–17:00 begins before 12:00, when the stretch before it ends.']
	])('%s is refused with a sentence', (text, error) => expect(readHours(1, text)).toEqual({ error }));
	it('come back from their own text', () => {
		const hours = [
			{ day: 1, from: '07:00', to: '12:00' },
			{ day: 1, from: '13:00', to: '17:00' },
			{ day: 7, from: '00:00', to: '24:00' }
		];
		expect(
			typedHours(hours).flatMap((text, at) => (readHours(at + 1, text) as { hours: unknown[] }).hours)
		).toEqual(hours);
	});
});
