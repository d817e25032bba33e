import { describe, expect, it } from 'vitest';
import { THIN } from '$lib/domain/display/format';
import type { Rule } from '$lib/domain/model';
import { ruleSentence, subjectOf } from './rule-sentence';

const rule = (own: Partial<Rule>): Rule => ({
	title: 'Rule',
	subject: { channel: 'coolant_temp' },
	relation: 'at_most',
	limit: 110,
	holdS: 0,
	severity: 'review',
	...own
});
const read = (own: Partial<Rule>) =>
	`${subjectOf(rule(own)).name} ${ruleSentence(rule(own))}`.replaceAll('\u00A0', ' ').replaceAll(THIN, ' ');

describe('a rule read out', () => {
	it.each<[Partial<Rule>, string]>([
		[{ holdS: 2 }, 'Coolant temperature at most 110 °C, held 2 s'],
		[
			{ subject: { metric: 'bte_max' }, relation: 'at_least', limit: 0.28 },
			'Brake thermal efficiency, best at least 28 %'
		],
		[{ subject: { fuel: 'oxygenMassPct' }, limit: 3.7 }, 'Oxygen by mass at most 3.7 %'],
		[
			{ subject: { channel: 'lambda_sensor' }, relation: 'between', limit: [0.8, 1.1] },
			'Lambda, by sensor between 0.8 and 1.1'
		],
		[
			{
				subject: { channel: 'fuel_energy_flow' },
				limit: {
					over: 'speed',
					table: [
						[2000, 800],
						[9000, 3000]
					]
				},
				holdS: 0.5,
				mergeGapS: 1
			},
			'Fuel energy flow at most a table of 2 points over engine speed, held 0.5 s, spans less than 1 s apart taken as one'
		],
		[{ subject: { expression: 'power / fuel_flow' }, limit: 12 }, 'power / fuel_flow at most 12']
	])('%j', (own, text) => expect(read(own)).toBe(text));
});
