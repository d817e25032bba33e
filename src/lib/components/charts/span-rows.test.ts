import { expect, it } from 'vitest';
import type { Finding, Flag } from '$lib/domain/model';
import { shadesOf, spanRows } from './span-rows';

const WORST = { value: 172.1, unit: 'N·m', limit: 167.1, at: 13.2, ratio: 1.03 };
const flag = (rule: string, severity: Flag['severity'], spans: Flag['spans']): Flag => ({
	rule,
	severity,
	spans,
	worst: WORST,
	totalS: 2.5,
	message: `${rule} was crossed.`
});
const GAP: Finding = {
	code: 'gap',
	severity: 'warning',
	message: 'Samples are missing.',
	spans: [[18, 18.6]]
};
const SPIKE: Finding = {
	code: 'spike',
	severity: 'info',
	message: 'A spike.',
	spans: [[3, 3]],
	channel: 'torque'
};
const ROWS = spanRows(
	[
		flag('Fuel energy flow', 'review', [[12, 14.5]]),
		flag('Octane', 'breach', []),
		flag('Oil', 'breach', [[1, 2]])
	],
	[SPIKE, GAP]
);

it('puts the worst first and leaves out what has no place on the clock', () => {
	expect(ROWS.map((row) => row.title)).toEqual([
		'Oil',
		'Fuel energy flow',
		'Samples are missing.',
		'A spike.'
	]);
});
it('shades every pane for a rule, one for a channel, none for a note', () => {
	expect(shadesOf(ROWS, 'torque').map((shade) => shade.tone)).toEqual(['limit', 'attention', 'attention']);
	expect(shadesOf(spanRows([], [{ ...GAP, channel: 'speed' }]), 'torque')).toEqual([]);
});
