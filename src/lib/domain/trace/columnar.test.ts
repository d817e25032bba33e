import { describe, expect, it } from 'vitest';
import { openColumnar, type TraceWindow } from './columnar';
import { encodeColumnar } from './encode-columnar';
import type { Trace, TraceColumn } from './trace';
import { decodeWindow, encodeWindow } from './window-bytes';

const column = (code: string, values: Float64Array): TraceColumn => ({
	code,
	header: `${code} as written`,
	unit: 'N·m',
	sourceUnit: 'Nm',
	confidence: 0.9,
	index: 1,
	values
});

function traceOf(rows: number, clock = true): Trace {
	const wave = Float64Array.from({ length: rows }, (_, i) => 100 * Math.sin(i / 5000) + ((i * 7919) % 13));
	const sparse = Float64Array.from({ length: rows }, (_, i) => (i % 1000 === 0 ? i : NaN));
	return {
		time: clock ? Float64Array.from({ length: rows }, (_, i) => i * 0.001 + (i > rows / 2 ? 5 : 0)) : null,
		columns: [column('torque', wave), column('sparse', sparse)],
		rowNumbers: Uint32Array.from({ length: rows }, (_, i) => i + 2),
		rows
	};
}

async function opened(trace: Trace) {
	const bytes = encodeColumnar(trace);
	const seen = { reads: 0, bytes: 0 };
	const columnar = await openColumnar((from, length) => {
		expect(from + length).toBeLessThanOrEqual(bytes.length);
		seen.reads++;
		seen.bytes += length;
		return Promise.resolve(bytes.subarray(from, from + length));
	});
	return { columnar, seen, size: bytes.length };
}

/** Lowest and highest of the samples that each bucket of a window covers, by looking at all of them. */
function bruteForce(trace: Trace, code: string, window: TraceWindow): { lo: number[]; hi: number[] } {
	const values = trace.columns.find((entry) => entry.code === code)!.values;
	const lo = window.time.map(() => Infinity);
	const hi = window.time.map(() => -Infinity);
	let bucket = -1;
	for (let i = 0; i < trace.rows; i++) {
		const t = trace.time![i]!;
		if (t < window.from || t > window.to) continue;
		while (bucket + 1 < window.time.length && window.time[bucket + 1]! <= t) bucket++;
		if (Number.isNaN(values[i]!)) continue;
		lo[bucket] = Math.min(lo[bucket]!, values[i]!);
		hi[bucket] = Math.max(hi[bucket]!, values[i]!);
	}
	return { lo, hi };
}

describe('a stored trace', () => {
	const trace = traceOf(400_000);

	it.each([
		['all of it', undefined, undefined, 700],
		['a window off every block', 12.3457, 371.0123, 500],
		['a window over the gap', 199, 206, 300],
		['few buckets over much', 0.001, 399, 7],
		['a narrow window', 100, 101, 333],
		['one bucket', 3, 390, 1]
	])('answers exact extremes in each bucket: %s', async (_, from, to, points) => {
		const { columnar } = await opened(trace);
		const window = await columnar.window({ channels: ['torque', 'sparse'], from, to, points });
		expect(window.mode).toBe('envelope');
		expect(window.time).toHaveLength(points);
		for (const channel of window.channels) {
			const exact = bruteForce(trace, channel.code, window);
			channel.lo.forEach((value, k) => {
				if (value === null) expect(exact.lo[k]).toBe(Infinity);
				else
					expect(Math.abs(value - exact.lo[k]!)).toBeLessThanOrEqual(
						1e-6 * Math.max(1, Math.abs(exact.lo[k]!))
					);
			});
			channel.hi.forEach((value, k) => {
				if (value !== null)
					expect(Math.abs(value - exact.hi[k]!)).toBeLessThanOrEqual(
						1e-6 * Math.max(1, Math.abs(exact.hi[k]!))
					);
			});
		}
	});

	it('keeps a spike of one sample at every zoom', async () => {
		const spiked = traceOf(300_000);
		spiked.columns[0]!.values[123_457] = 1899.75;
		const { columnar } = await opened(spiked);
		for (const points of [3, 50, 1000, 4000]) {
			const window = await columnar.window({ channels: ['torque'], points });
			expect(Math.max(...window.channels[0]!.hi.map((value) => value ?? 0))).toBe(1899.75);
		}
	});

	it('reads a small part of the object', async () => {
		const { columnar, seen, size } = await opened(trace);
		await columnar.window({ channels: ['torque'], from: 50, to: 350, points: 1000 });
		expect(seen.bytes).toBeLessThan(size / 20);
		expect(seen.reads).toBeLessThan(30);
	});

	it('answers the samples themselves where there are few', async () => {
		const { columnar } = await opened(trace);
		const window = await columnar.window({ channels: ['torque'], from: 10, to: 10.0105, points: 500 });
		expect(window.mode).toBe('samples');
		expect(window.samples).toBe(11);
		expect(window.time[0]).toBe(10);
		expect(window.channels[0]!.lo).toEqual(window.channels[0]!.hi);
		expect(window.channels[0]!.lo[3]).toBeCloseTo(trace.columns[0]!.values[10_003]!, 4);
	});

	it('answers nothing for a window past the end or inside a gap', async () => {
		const { columnar } = await opened(trace);
		for (const [from, to] of [
			[500, 600],
			[201, 204]
		]) {
			const window = await columnar.window({ channels: ['torque'], from, to, points: 100 });
			expect(window).toMatchObject({ samples: 0, time: [] });
		}
	});

	it('tells channels and range, and keeps seven digits', async () => {
		const { columnar } = await opened(trace);
		expect(columnar.channels[0]).toEqual({
			code: 'torque',
			header: 'torque as written',
			unit: 'N·m',
			sourceUnit: 'Nm',
			confidence: 0.9
		});
		expect(await columnar.range()).toEqual([0, 399.999 + 5]);
	});

	it('keeps 64 bits for a channel that needs them', async () => {
		const stamps = Float64Array.from({ length: 100 }, (_, i) => 1.7e9 + i * 0.25);
		const { columnar } = await opened({ ...traceOf(100), columns: [column('stamp', stamps)] });
		const window = await columnar.window({ channels: ['stamp'], points: 100 });
		expect(window.channels[0]!.lo[3]).toBe(1.7e9 + 0.75);
	});

	it('holds a table of points over its rows', async () => {
		const { columnar } = await opened(traceOf(12, false));
		const window = await columnar.window({ channels: ['torque'], from: 2, to: 4, points: 100 });
		expect(window).toMatchObject({ clock: 'row', time: [2, 3, 4] });
	});

	it.each([0, 1, 63, 64, 65, 4096, 4097])('holds %d rows', async (rows) => {
		const { columnar } = await opened(traceOf(rows));
		const window = await columnar.window({ channels: ['torque'], points: 10 });
		expect(window.samples).toBe(rows);
		expect(window.time).toHaveLength(Math.min(rows, 10));
	});

	it('says so when the object is something else', async () => {
		const other = new TextEncoder().encode('time [s],speed [rpm]\n0,1000\n');
		await expect(
			openColumnar((from, length) => Promise.resolve(other.subarray(from, from + length)))
		).rejects.toThrow(/not a stored trace/);
	});

	it('goes over the wire and back unchanged', async () => {
		const { columnar } = await opened(trace);
		const window = await columnar.window({ channels: ['sparse', 'torque'], points: 900 });
		expect(decodeWindow(encodeWindow(window))).toEqual(window);
		expect(() => decodeWindow(new Uint8Array(40))).toThrow(/no trace window/);
	});
});
