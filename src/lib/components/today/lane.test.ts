import { describe, expect, it } from 'vitest';
import { barsOf, placeOf, sharedStretch, ticksOf, type LaneCell } from './lane';

const at = (clock: string) => `2026-12-07T${clock}:00.000Z`;
const day = { from: new Date(at('00:00')), to: new Date('2026-12-08T00:00:00.000Z') };
const stretch = { from: new Date(at('08:00')), to: new Date(at('18:00')) };
const now = new Date(at('13:00'));
const cell: LaneCell = {
	open: [{ from: at('08:30'), to: at('17:00') }],
	entries: [
		{
			kind: 'booking',
			id: 'x1',
			number: 'HB-B-0001',
			state: 'confirmed',
			buildTitle: 'Long cam',
			from: at('09:00'),
			to: at('12:00'),
			rigUpMinutes: 30,
			rigDownMinutes: 0
		},
		{ kind: 'taken', from: at('16:00'), to: at('19:30') }
	],
	runs: [{ number: 'HB-R-0001', from: at('10:00'), to: null }]
};

describe('a lane', () => {
	it('reaches around all that happens, or the opening hours', () => {
		expect(sharedStretch(day, [cell], now)).toEqual({
			from: new Date(at('08:00')),
			to: new Date(at('20:00'))
		});
		const alwaysOpen = { open: [{ from: at('00:00'), to: day.to.toISOString() }], entries: [], runs: [] };
		expect(sharedStretch(day, [alwaysOpen], now)).toEqual({
			from: new Date(at('13:00')),
			to: new Date(at('14:00'))
		});
	});

	it('draws each thing at its part of the width, cut at the ends of the stretch', () => {
		const bars = barsOf(cell, stretch, now, 'UTC');
		expect(bars.map(({ kind, x, width }) => [kind, x, width])).toEqual([
			['shut', '0%', '5%'],
			['shut', '90%', '10%'],
			['rig', '5%', '5%'],
			['confirmed', '10%', '30%'],
			['taken', '80%', '20%'],
			['run', '20%', '30%']
		]);
		expect(bars.map(({ href }) => href).filter(Boolean)).toEqual(['/bookings/x1', '/runs/HB-R-0001']);
		expect(bars[3]!.title).toBe('HB-B-0001, 09:00–12:00, confirmed: Long cam');
		expect(bars[4]!.title).toBe('Taken, 16:00–19:30');
	});

	it('leaves out what is of another day', () => {
		const tomorrow = { from: '2026-12-08T09:00:00Z', to: '2026-12-08T10:00:00Z' };
		const bars = barsOf(
			{
				open: [{ from: at('00:00'), to: day.to.toISOString() }],
				entries: [{ kind: 'taken', ...tomorrow }],
				runs: []
			},
			stretch,
			now,
			'UTC'
		);
		expect(bars).toEqual([]);
	});

	it('marks seven hours at most', () => {
		expect(ticksOf(stretch, 'UTC').map(({ label }) => label)).toEqual([
			'08:00',
			'10:00',
			'12:00',
			'14:00',
			'16:00'
		]);
		expect(ticksOf(day, 'UTC')).toHaveLength(6);
		expect(placeOf(now, stretch)).toBe('50%');
	});
});
