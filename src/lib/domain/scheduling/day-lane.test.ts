import { describe, expect, it } from 'vitest';
import {
	drawnStretch,
	isRunning,
	lateMinutes,
	overrunMinutes,
	progressOf,
	recordNeeds,
	waitsMinutes,
	type Recorded
} from './day-lane';

const at = (clock: string) => new Date(`2026-12-07T${clock}:00Z`);
const slot = { from: at('09:00'), to: at('12:00'), rigUpMinutes: 30, rigDownMinutes: 15 };
const run = (more: Partial<Recorded> = {}): Recorded => ({
	startedAt: at('09:00'),
	isOpen: true,
	traces: 0,
	unmapped: 0,
	...more
});

describe('what is on in a cell', () => {
	it('counts whole minutes from the start and to the end', () => {
		expect(progressOf(slot, at('10:30'))).toEqual({ elapsedMinutes: 90, remainingMinutes: 90 });
		expect(progressOf(slot, at('12:05'))).toEqual({ elapsedMinutes: 185, remainingMinutes: -5 });
		expect(progressOf(slot, at('12:00')).remainingMinutes).toBe(0);
		expect(progressOf({ from: at('09:00'), to: null }, at('09:01')).remainingMinutes).toBeNull();
	});

	it('takes a record of yesterday as forgotten, not as running', () => {
		expect(isRunning(run(), at('23:00'))).toBe(true);
		expect(isRunning(run(), new Date('2026-12-08T09:00:00Z'))).toBe(false);
		expect(isRunning(run({ isOpen: false }), at('10:00'))).toBe(false);
	});
});

describe('late and overrunning', () => {
	it.each([
		['08:59', 0],
		['09:10', 0],
		['09:11', 11],
		['11:59', 179],
		['12:00', 0]
	])('a slot without a record at %s is %i min late', (clock, minutes) =>
		expect(lateMinutes(slot, [], at(clock))).toBe(minutes)
	);

	it('is not late once a record was opened', () => {
		expect(lateMinutes(slot, [run({ startedAt: at('09:40'), isOpen: false })], at('10:00'))).toBe(0);
	});

	it.each([
		['11:59', 0],
		['12:00', 0],
		['12:20', 20]
	])('an open record at %s overruns by %i min', (clock, minutes) =>
		expect(overrunMinutes(slot, [run()], at(clock))).toBe(minutes)
	);

	it('does not overrun once the record is closed, or when there was none', () => {
		expect(overrunMinutes(slot, [run({ isOpen: false })], at('12:20'))).toBe(0);
		expect(overrunMinutes(slot, [], at('12:20'))).toBe(0);
	});

	it('says for how long the next has to wait', () => {
		const next = { occupiedFrom: at('13:00') };
		// Begun at 10:00 it ends at 13:00, and 15 min of rig-down follow.
		expect(waitsMinutes(slot, next, true, at('10:00'))).toBe(15);
		expect(waitsMinutes(slot, next, true, at('09:45'))).toBe(0);
		expect(waitsMinutes(slot, next, false, at('12:30'))).toBe(0);
		expect(waitsMinutes(slot, next, false, at('12:50'))).toBe(5);
	});
});

describe('what a record lacks', () => {
	it('asks for a record as soon as the slot has begun, and still after its end', () => {
		expect(recordNeeds(slot, [], at('08:59'))).toEqual([]);
		expect(recordNeeds(slot, [], at('09:00'))).toEqual(['no_record']);
		expect(recordNeeds(slot, [], at('15:00'))).toEqual(['no_record']);
	});

	it('asks for a trace when the work is over, not while it goes on', () => {
		expect(recordNeeds(slot, [run()], at('11:00'))).toEqual([]);
		expect(recordNeeds(slot, [run()], at('12:00'))).toEqual(['no_trace']);
		expect(recordNeeds(slot, [run({ isOpen: false })], at('11:00'))).toEqual(['no_trace']);
		expect(recordNeeds(slot, [run({ isOpen: false, traces: 1 })], at('11:00'))).toEqual([]);
		expect(recordNeeds(null, [run()], at('09:59'))).toEqual([]);
		expect(recordNeeds(null, [run()], at('10:00'))).toEqual(['no_trace']);
	});

	it('asks for a map while a trace waits for one, and says each once', () => {
		const unmapped = run({ traces: 1, unmapped: 1 });
		expect(recordNeeds(slot, [unmapped, unmapped], at('10:00'))).toEqual(['needs_map']);
	});
});

describe('the stretch of the day that is drawn', () => {
	const day = { from: at('00:00'), to: new Date('2026-12-08T00:00:00Z') };

	it('reaches to the full hours around everything and the present', () => {
		const things = [
			{ from: at('07:30'), to: at('17:15') },
			{ from: at('09:00'), to: at('12:00') }
		];
		expect(drawnStretch(day, things, at('18:20'))).toEqual({ from: at('07:00'), to: at('19:00') });
	});

	it('stays within the day', () => {
		const long = { from: new Date('2026-12-01T00:00:00Z'), to: new Date('2026-12-20T00:00:00Z') };
		expect(drawnStretch(day, [long], at('10:00'))).toEqual(day);
	});

	it('is an hour at least, and leaves out other days', () => {
		const tomorrow = { from: new Date('2026-12-08T07:00:00Z'), to: new Date('2026-12-08T09:00:00Z') };
		expect(drawnStretch(day, [tomorrow], at('10:00'))).toEqual({ from: at('10:00'), to: at('11:00') });
		expect(drawnStretch(day, [], at('10:20'))).toEqual({ from: at('10:00'), to: at('11:00') });
	});
});
