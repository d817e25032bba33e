import { describe, expect, it } from 'vitest';
import { bytesOf } from '../../../../tests/traces/traces';
import { guessRun } from './guess-run';

const file = (text: string) => new TextEncoder().encode(text);
const rows = (n: number, row: (i: number) => string) =>
	Array.from({ length: n }, (_, i) => row(i)).join('\n');
const timed = (stamps: string[], header = 'Time') =>
	file(`${header},speed [rpm],torque [Nm]\n${stamps.map((stamp) => `${stamp},2000,100`).join('\n')}\n`);

describe('the kind of a run, from its file', () => {
	it.each([
		['sweep-plain.csv', 'power_sweep'],
		['sweep-us-units.csv', 'power_sweep'],
		['steady-points.csv', 'steady_points'],
		['broken-no-time.csv', 'point_table']
	])('%s is %s', (name, kind) => expect(guessRun(bytesOf(name), true).kind?.value).toBe(kind));

	it('tells motoring by the sign of the torque', () => {
		const bytes = file(`time [s],speed [rpm],torque [Nm]\n${rows(60, (i) => `${i},${1000 + 50 * i},-12`)}\n`);
		expect(guessRun(bytes, true).kind?.value).toBe('motoring');
	});

	it('tells a log without speed or load', () => {
		const bytes = file(`time [s],oil temperature [degC]\n${rows(9, (i) => `${i},80`)}\n`);
		expect(guessRun(bytes, true).kind?.value).toBe('free_log');
	});

	it('says nothing of the shape when it has only a part, or no shape is to be seen', () => {
		expect(guessRun(bytesOf('sweep-plain.csv').subarray(0, 20_000), false).kind).toBeNull();
		expect(guessRun(bytesOf('electrical.csv'), true).kind).toBeNull();
		expect(guessRun(bytesOf('broken-page.csv'), true)).toEqual({ kind: null, start: null });
		expect(guessRun(file(''), true)).toEqual({ kind: null, start: null });
	});
});

describe('the start of a run, from its file', () => {
	it.each([
		[['2026-03-14T08:30:00Z', '2026-03-14T08:30:01Z'], { instant: new Date('2026-03-14T08:30:00Z') }],
		[['2026-03-14 08:30:00', '2026-03-14 08:30:01'], { wallClock: '2026-03-14T08:30:00' }],
		[['14.03.2026 08:30:00', '14.03.2026 08:30:01'], { wallClock: '2026-03-14T08:30:00' }],
		[['03/14/2026 08:30:00', '03/14/2026 08:30:01'], { wallClock: '2026-03-14T08:30:00' }],
		[['03/04/2026 08:30:00', '03/04/2026 08:30:01'], null],
		[['08:30:00', '08:30:01'], null],
		[['0.00', '0.02', '0.04'], null],
		[['1773477000', '1773477001', '1773477002'], { instant: new Date(1_773_477_000_000) }],
		[['1773477000000', '1773477000020', '1773477000040'], { instant: new Date(1_773_477_000_000) }]
	])('%j', (stamps, start) => expect(guessRun(timed(stamps), true).start).toEqual(start));
});
