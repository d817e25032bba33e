import { describe, expect, it } from 'vitest';
import type { Rule } from '../model';
import { ruleChanges } from './rule-changes';

const rule = (title: string, changes: Partial<Rule> = {}): Rule => ({
	title,
	subject: { channel: 'coolant_temp' },
	relation: 'at_most',
	limit: 110,
	holdS: 2,
	severity: 'review',
	...changes
});
const oil = rule('Oil', { subject: { channel: 'oil_pressure' }, relation: 'at_least', limit: 200 });

describe('what changed between two versions', () => {
	it('is nothing where rules only changed places', () =>
		expect(ruleChanges([rule('Coolant'), oil], [oil, rule('Coolant')])).toEqual({ changes: [], same: 2 }));
	it('knows a rule again by its title', () =>
		expect(ruleChanges([rule('Coolant'), oil], [rule('Coolant', { limit: 105 }), oil])).toEqual({
			changes: [{ kind: 'changed', before: rule('Coolant'), after: rule('Coolant', { limit: 105 }) }],
			same: 1
		}));
	it('knows a retitled one by what it judges, but a title first', () => {
		const { changes } = ruleChanges(
			[rule('A'), rule('B', { limit: 90 })],
			[rule('C'), rule('A', { limit: 80 })]
		);
		expect(changes).toEqual([
			{ kind: 'changed', before: rule('B', { limit: 90 }), after: rule('C') },
			{ kind: 'changed', before: rule('A'), after: rule('A', { limit: 80 }) }
		]);
	});
	it('tells what came and what went', () =>
		expect(ruleChanges([oil], [rule('Coolant')]).changes).toEqual([
			{ kind: 'added', after: rule('Coolant') },
			{ kind: 'removed', before: oil }
		]));
	it('takes a merge gap left out as none given', () =>
		expect(ruleChanges([rule('A')], [rule('A', { mergeGapS: undefined })]).same).toBe(1));
});
