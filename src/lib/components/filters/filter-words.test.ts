import { describe, expect, it } from 'vitest';
import { filterWords, without } from './filter-words';

const choices = {
	build: [{ value: 'b1a6c0de-0000-4000-8000-000000000001', code: 'B12' }],
	cell: [{ value: 'C1', code: 'C1' }]
};
const say = (asked: Record<string, string>) => filterWords(asked, choices).map(({ text }) => text);

describe('filters in words', () => {
	it('are one sentence, in its order and not the address’s', () =>
		expect(
			say({ to: '2026-03-31', from: '2026-03-01', state: 'accepted', cell: 'C1', kind: 'power_sweep' })
		).toEqual(['cell C1', 'kind power sweep', 'accepted runs', 'since 1 Mar 2026', 'until 31 Mar 2026']));
	it('say a code where the address has an id', () =>
		expect(say({ build: 'b1a6c0de-0000-4000-8000-000000000001' })).toEqual(['build B12']));
	it('keep what there is not as it was typed', () =>
		expect(say({ cell: 'C404', state: 'mood', from: 'spring' })).toEqual([
			'cell C404',
			'state mood',
			'since spring'
		]));
	it('count chosen runs', () => {
		expect(say({ runs: 'A-R-0001' })).toEqual(['only run A-R-0001']);
		expect(say({ runs: 'A-R-0001,A-R-0002' })).toEqual(['2 chosen runs']);
	});
	it('say nothing of what no filter is', () => expect(say({ sort: '-started', cell: '' })).toEqual([]));
});

it('takes one filter out of an address and goes to the first page', () =>
	expect(without(new URL('http://lab.example/runs?cell=C1&cursor=x&sort=number'), 'cell')).toBe(
		'?sort=number'
	));
