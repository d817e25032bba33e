import { expect, it } from 'vitest';
import { groupsOf, metricOptions } from './metric-options';

it('lists every known figure with its unit, in groups, and says which no run has', () => {
	const options = metricOptions(['bte_max', 'raw_max_oil_temp'], 'si');
	expect(options.find(({ value }) => value === 'bte_max')).toEqual({
		value: 'bte_max',
		label: 'Brake thermal efficiency, best, %',
		group: 'Efficiency and fuel'
	});
	expect(options.find(({ value }) => value === 'peak_power')!.label).toBe('Peak power, kW (no run has it)');
	expect(options.at(-1)).toMatchObject({ value: 'raw_max_oil_temp', group: 'Channels' });
	expect(groupsOf(options).map(([name]) => name)).toEqual([
		'Power and torque',
		'Efficiency and fuel',
		'Air and mixture',
		'Pressures and temperatures',
		'Whole run',
		'Electrical',
		'Channels'
	]);
});
it('names the unit that the reader prefers', () =>
	expect(metricOptions([], 'us').find(({ value }) => value === 'peak_power')!.label).toBe(
		'Peak power, hp (no run has it)'
	));
