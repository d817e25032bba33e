import { describe, expect, it } from 'vitest';
import { groupWord, queryOf, questionOf } from './question';

const ask = (text: string, metrics = ['peak_power', 'bte_max']) =>
	questionOf(new URLSearchParams(text), metrics);

describe('what an address asks of the trends', () => {
	it('is the best efficiency by build where it says nothing', () => {
		expect(ask('')).toMatchObject({ metric: 'bte_max', groupBy: 'build', engine: '', from: '' });
	});
	it('is the first figure there is where no run has an efficiency', () => {
		expect(ask('', ['work_done']).metric).toBe('work_done');
	});
	it('takes what it says', () => {
		expect(ask('metric=peak_power&groupBy=month&fuel=F1&to=2026-03-31')).toMatchObject({
			metric: 'peak_power',
			groupBy: 'month',
			fuel: 'F1',
			to: '2026-03-31'
		});
	});
	it('names a fuel batch as one', () => {
		const { groupBy } = ask('groupBy=batch');
		expect(groupWord(groupBy, true)).toBe('Fuel batch');
	});
	it('goes to the API without what is not said', () => {
		expect(queryOf(ask('fuel=F1&cell='))).toBe('metric=bte_max&groupBy=build&fuel=F1');
	});
	it('leaves out what is no figure, no group and no date', () => {
		expect(ask('metric=mood&groupBy=moon&from=spring')).toMatchObject({
			metric: 'bte_max',
			groupBy: 'build',
			from: ''
		});
	});
});
