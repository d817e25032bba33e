import { describe, expect, it } from 'vitest';
import { openingText } from './opening-text';

const read = (hours: Parameters<typeof openingText>[0]) =>
	openingText(hours).map(({ days, hours: text }) => `${days} ${text}`);
const on = (days: number[], from: string, to: string) => days.map((day) => ({ day, from, to }));

describe('opening hours', () => {
	it('put days of equal hours together', () =>
		expect(read([...on([1, 2, 3, 4], '06:00', '22:00'), ...on([5], '06:00', '17:30')])).toEqual([
			'Mon–Thu 06:00–22:00',
			'Fri 06:00–17:30'
		]));
	it('do not bridge a closed day', () =>
		expect(read(on([1, 3], '07:00', '19:00'))).toEqual(['Mon 07:00–19:00', 'Wed 07:00–19:00']));
	it('list the stretches of one day in order', () =>
		expect(read([...on([6], '13:00', '24:00'), ...on([6], '06:00', '12:00')])).toEqual([
			'Sat 06:00–12:00, 13:00–24:00'
		]));
	it('are always where none are recorded, and never where the list is empty', () => {
		expect(read(null)).toEqual(['Every day at any hour']);
		expect(read([])).toEqual([]);
	});
});
