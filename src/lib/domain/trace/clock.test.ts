import { describe, expect, it } from 'vitest';
import { makeClock } from './clock';

const codes = (clock: ReturnType<typeof makeClock>) => clock.findings.map(({ code }) => code);
const at = (count: number, step: number, start = 0) =>
	Array.from({ length: count }, (_, i) => start + i * step);

describe('makeClock', () => {
	it('counts from the trace’s start and finds nothing in an even clock', () => {
		const clock = makeClock(Float64Array.from(at(100, 0.02, 17)), 'number');
		expect(clock.time[0]).toBe(0);
		expect(clock.time[99]).toBeCloseTo(1.98, 9);
		expect(clock.findings).toEqual([]);
		expect(clock.order).toBeNull();
	});

	it('tells a gap of more than five steps, not one of five', () => {
		expect(codes(makeClock(Float64Array.from([...at(50, 0.1), ...at(50, 0.1, 5.4)]), 'number'))).toEqual([]);
		const clock = makeClock(Float64Array.from([...at(50, 0.1), ...at(50, 0.1, 5.5)]), 'number');
		expect(clock.findings[0]).toMatchObject({ code: 'gap', severity: 'warning' });
		expect(clock.findings[0]!.spans[0]![0]).toBeCloseTo(4.9, 9);
		expect(clock.findings[0]!.spans[0]![1]).toBeCloseTo(5.5, 9);
	});

	it('tells repeated stamps and keeps both rows', () => {
		const clock = makeClock(Float64Array.of(0, 1, 1, 2, 3, 4), 'number');
		expect(clock.time).toHaveLength(6);
		expect(clock.findings).toMatchObject([{ code: 'repeated_stamp', spans: [[1, 1]] }]);
	});

	it('sorts a short disorder', () => {
		const clock = makeClock(Float64Array.of(0, 1, 3, 2, 4, 5), 'number');
		expect(Array.from(clock.time)).toEqual([0, 1, 2, 3, 4, 5]);
		expect(Array.from(clock.order!)).toEqual([0, 1, 3, 2, 4, 5]);
		expect(codes(clock)).toEqual(['time_not_increasing']);
	});

	it('carries on where the logger starts again', () => {
		const clock = makeClock(Float64Array.from([...at(50, 1), ...at(50, 1)]), 'number');
		expect(clock.time[50]).toBe(50);
		expect(clock.time[99]).toBe(99);
		expect(codes(clock)).toEqual(['time_not_increasing']);
	});

	it('leaves out rows without a stamp, and says how many', () => {
		const clock = makeClock(Float64Array.of(0, 1, NaN, 3, 4), 'number');
		expect(Array.from(clock.order!)).toEqual([0, 1, 3, 4]);
		expect(clock.findings[0]!.message).toMatch(/1 of 5 rows/);
	});

	it('counts on over midnight', () => {
		const clock = makeClock(Float64Array.of(86_399, 86_399.5, 0, 0.5), 'clock');
		expect(Array.from(clock.time)).toEqual([0, 0.5, 1, 1.5]);
		expect(codes(clock)).toEqual(['clock_wrap']);
	});

	it('spreads the rows of a clock that only tells whole seconds', () => {
		const clock = makeClock(
			Float64Array.from({ length: 100 }, (_, i) => Math.floor((i + 3) / 10)),
			'number'
		);
		const steps = Array.from(clock.time.subarray(1), (value, i) => value - clock.time[i]!);
		for (const step of steps) expect(step).toBeCloseTo(0.1, 6);
		expect(codes(clock)).toEqual(['clock_coarse']);
	});
});
