import { describe, expect, it } from 'vitest';
import { listColumns, listLead } from './run-list';

describe('the run list', () => {
	it('has the chosen figures as columns that sort, and the client for staff only', () => {
		const columns = listColumns(['bte_max', 'oil_temp_max'], true);
		expect(columns.find(({ key }) => key === 'oil_temp_max')).toMatchObject({
			unit: '°C',
			sort: 'oil_temp_max'
		});
		expect(columns.at(-1)!.key).toBe('client');
		expect(listColumns([], false).some(({ key }) => key === 'client')).toBe(false);
	});
	it.each([
		[undefined, 'Runs, newest first'],
		['started', 'Runs, oldest first'],
		['-number', 'Runs by number, last first'],
		['-peak_power', 'Runs by peak power, highest first'],
		['bsfc_min', 'Runs by BSFC, lowest, lowest first']
	])('sorted by %s reads as %s', (sort, text) => expect(listLead(sort)).toBe(text));
});
