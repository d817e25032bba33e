import { describe, expect, it } from 'vitest';
import { queryOf, questionOf } from './question';

const ask = (text: string, metrics = ['peak_power', 'bte_max']) =>
	questionOf(new URLSearchParams(text), metrics);

describe('what an address asks of the trends', () => {
	it('is the best efficiency by build where it says nothing', () => {
		expect(ask('')).toEqual({ metric: 'bte_max', groupBy: 'build', view: 'groups', against: '', asked: {} });
	});
	it('is the first figure there is where no run has an efficiency', () => {
		expect(ask('', ['work_done']).metric).toBe('work_done');
	});
	it('takes what it says', () => {
		expect(ask('metric=peak_power&groupBy=batch&view=time&fuel=F1&to=2026-03-31&repeats=once')).toEqual({
			metric: 'peak_power',
			groupBy: 'batch',
			view: 'time',
			against: '',
			asked: { fuel: 'F1', to: '2026-03-31', repeats: 'once' }
		});
	});
	it('goes to the API without what is not said and what only the page shows', () => {
		expect(queryOf(ask('fuel=F1&cell=&view=time&state=not_voided&against=B1'))).toBe(
			'metric=bte_max&groupBy=build&fuel=F1&against=B1'
		);
	});
	it('has the usual group where there is no such group, and keeps a filter that names nothing', () => {
		expect(ask('metric=Mood%21&groupBy=moon&from=spring')).toMatchObject({
			metric: 'bte_max',
			groupBy: 'build',
			asked: { from: 'spring' }
		});
	});
});
