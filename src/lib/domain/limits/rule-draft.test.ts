import { describe, expect, it } from 'vitest';
import type { Rule } from '../model';
import { draftOf, emptyRule, fieldOfIssue, limitUnit, ruleOf } from './rule-draft';

const listed = (code: string) => code === 'bte_max' || code === 'peak_power';
const plain = { holdS: 2, severity: 'review' } as const;
const rules: Rule[] = [
	{ title: 'Coolant', subject: { channel: 'coolant_temp' }, relation: 'at_most', limit: 110, ...plain },
	{ title: 'One pipe', subject: { channel: 'exhaust_temp.2' }, relation: 'at_most', limit: 950, ...plain },
	{ title: 'Best', subject: { metric: 'bte_max' }, relation: 'at_least', limit: 0.28, ...plain },
	{ title: 'Sample', subject: { metric: 'raw_max_power' }, relation: 'at_most', limit: 300, ...plain },
	{ title: 'Octane', subject: { fuel: 'ron' }, relation: 'between', limit: [95, 99.5], ...plain },
	{
		title: 'Ratio',
		subject: { expression: 'power / fuel_flow' },
		relation: 'at_most',
		limit: 12,
		...plain,
		mergeGapS: 0.5
	},
	{
		title: 'Efficiency over speed',
		subject: { channel: 'bte' },
		relation: 'at_most',
		limit: {
			over: 'speed',
			table: [
				[2000, 0.29],
				[6000, 0.07]
			]
		},
		...plain
	}
];

describe('a rule in a form', () => {
	it.each(rules)('$title comes back as it was', (rule) => {
		const back = ruleOf(draftOf(rule, listed));
		expect(back.errors).toEqual([]);
		expect(JSON.parse(JSON.stringify(back.rule))).toEqual(rule);
	});
	it('types an efficiency in %', () => {
		const draft = draftOf(rules[2]!, listed);
		expect([draft.limit, limitUnit(draft).unit]).toEqual(['28', '%']);
	});
	it('says at each field what is no number, and loses nothing of it', () => {
		const draft = { ...emptyRule(), subject: 'channel:speed', limit: '6 k', holdS: '', mergeGapS: 'x' };
		expect(ruleOf(draft).errors.map(({ field }) => field)).toEqual(['limit', 'holdS', 'mergeGapS']);
	});
	it('says in which row of a table', () => {
		const table = [
			{ x: '1000', y: '10' },
			{ x: '', y: '' },
			{ x: '2000', y: 'high' }
		];
		const draft = { ...emptyRule(), subject: 'channel:speed', form: 'table' as const, table };
		expect(ruleOf(draft).errors).toMatchObject([{ field: 'table', row: 2, side: 'y' }]);
		expect(ruleOf({ ...draft, table: [] }).errors[0]?.message).toBe('Give at least one point.');
	});
	it('asks what is judged', () =>
		expect(ruleOf({ ...emptyRule(), limit: '1' }).errors).toEqual([
			{ field: 'subject', message: 'Choose what is judged.' }
		]));
	it('leads a complaint of the schema to the field it is about', () => {
		const draft = { ...emptyRule(), subject: 'expression' };
		expect(fieldOfIssue(['subject', 'expression'], draft)).toBe('subjectText');
		expect(fieldOfIssue(['limit'], draft)).toBe('limit');
		expect(fieldOfIssue(['limit'], { ...draft, form: 'table' })).toBe('table');
		expect(fieldOfIssue(['limit', 1], { ...draft, relation: 'between' })).toBe('high');
		expect(fieldOfIssue(['holdS'], draft)).toBe('holdS');
	});
});
