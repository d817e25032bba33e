import { describe, expect, it } from 'vitest';
import type { ProposedColumn } from '$lib/domain/trace';
import { channelChoices, codesOf, columnsOf, draftOf, unitChoices } from './map-draft';

const column = (index: number, more: Partial<ProposedColumn> = {}): ProposedColumn => ({
	index,
	header: `Column ${index}`,
	unit: null,
	guess: null,
	confidence: 0,
	reasons: [],
	ask: false,
	sample: [],
	...more
});
const draft = (...channels: string[]) =>
	channels.map((channel, index) => ({ index, channel, unit: '', reference: '' as const }));

describe('what the map editor starts with', () => {
	it('puts in what is sure and what is asked, and leaves the rest under its own header', () => {
		const made = draftOf([
			column(0, { guess: 'time', confidence: 0.95, unit: 's' }),
			column(1, { guess: 'torque', confidence: 0.6, ask: true }),
			column(2, { guess: 'oil_temp', confidence: 0.6 }),
			column(3)
		]);
		expect(made.map(({ channel }) => channel)).toEqual(['time', 'torque', '', '']);
		expect(made[0]?.unit).toBe('s');
	});
	it('leaves a choice to the person where two columns claim one channel', () => {
		const made = draftOf(
			[1, 2].map((index) => column(index, { guess: 'torque', confidence: 0.4, ask: true }))
		);
		expect(made.map(({ channel }) => channel)).toEqual(['', '']);
	});
});

describe('the codes that columns get', () => {
	it('numbers what may occur often, in the order of the file', () => {
		expect(codesOf(draft('exhaust_temp', 'speed', 'exhaust_temp', ''))).toEqual([
			'exhaust_temp.1',
			'speed',
			'exhaust_temp.2',
			null
		]);
	});
	it('takes no number that a column has already', () => {
		expect(codesOf(draft('exhaust_temp', 'exhaust_temp.1', 'exhaust_temp'))).toEqual([
			'exhaust_temp.2',
			'exhaust_temp.1',
			'exhaust_temp.3'
		]);
	});
	it('does not number what there is once only: the server says so', () => {
		expect(codesOf(draft('torque', 'torque'))).toEqual(['torque', 'torque']);
	});
	it('sends no unit and no reference where none is given', () => {
		const [oil, own] = columnsOf([
			{ index: 4, channel: 'oil_pressure', unit: ' bar ', reference: 'gauge' },
			{ index: 5, channel: '', unit: '  ', reference: '' }
		]);
		expect(oil).toEqual({ index: 4, channel: 'oil_pressure', unit: 'bar', reference: 'gauge' });
		expect(own).toEqual({ index: 5, channel: null, unit: null });
	});
});

describe('what is offered', () => {
	it('offers no channel that is computed, and each numbered guess', () => {
		const offered = channelChoices([column(0, { guess: 'exhaust_temp.3' })]);
		expect(offered).toContainEqual({ value: 'exhaust_temp.3', label: 'Exhaust temperature 3' });
		expect(offered.map(({ value }) => value)).not.toContain('bte');
	});
	it('offers the units of the channel’s kind', () => {
		expect(unitChoices('torque')).toContain('lbf·ft');
		expect(unitChoices('torque')).not.toContain('kPa');
		expect(unitChoices('')).toEqual([]);
	});
});
