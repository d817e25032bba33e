import type { TraceWindow } from './columnar';

/** `TRNW`, length of the header, the header as JSON padded to eight bytes, then time, then lowest and highest of each channel, all as 64-bit floats. */
const MAGIC = 0x574e5254;
const PREFIX_BYTES = 8;

const floats = (values: readonly (number | null)[]) => Float64Array.from(values, (value) => value ?? NaN);
const orNull = (values: Float64Array) => Array.from(values, (value) => (Number.isNaN(value) ? null : value));

/** A window as bytes for a chart; little-endian. `decodeWindow` reads it. */
export function encodeWindow(window: TraceWindow): Uint8Array {
	const { time, channels, ...rest } = window;
	const header = JSON.stringify({
		...rest,
		points: time.length,
		channels: channels.map(({ code, unit }) => ({ code, unit }))
	});
	const text = new TextEncoder().encode(header);
	const headerBytes = Math.ceil(text.length / 8) * 8;
	const arrays = [Float64Array.from(time), ...channels.flatMap(({ lo, hi }) => [floats(lo), floats(hi)])];
	const bytes = new Uint8Array(PREFIX_BYTES + headerBytes + arrays.length * time.length * 8).fill(
		32,
		PREFIX_BYTES
	);
	const prefix = new DataView(bytes.buffer);
	prefix.setUint32(0, MAGIC, true);
	prefix.setUint32(4, headerBytes, true);
	bytes.set(text, PREFIX_BYTES);
	arrays.forEach((array, k) => {
		bytes.set(new Uint8Array(array.buffer), PREFIX_BYTES + headerBytes + k * time.length * 8);
	});
	return bytes;
}

/**
 * Reads what `encodeWindow` wrote.
 *
 * @throws where the bytes are something else: an answer of another server or a cut one
 */
export function decodeWindow(bytes: Uint8Array): TraceWindow {
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	if (bytes.byteLength < PREFIX_BYTES || view.getUint32(0, true) !== MAGIC)
		throw new Error('These bytes are no trace window.');
	const headerBytes = view.getUint32(4, true);
	const header = JSON.parse(
		new TextDecoder().decode(bytes.subarray(PREFIX_BYTES, PREFIX_BYTES + headerBytes))
	) as Omit<TraceWindow, 'time' | 'channels'> & {
		points: number;
		channels: { code: string; unit: string }[];
	};
	const { points, channels, ...rest } = header;
	const array = (k: number) => {
		const from = PREFIX_BYTES + headerBytes + k * points * 8;
		return new Float64Array(bytes.slice(from, from + points * 8).buffer);
	};
	return {
		...rest,
		time: Array.from(array(0)),
		channels: channels.map((channel, k) => ({
			...channel,
			lo: orNull(array(1 + 2 * k)),
			hi: orNull(array(2 + 2 * k))
		}))
	};
}
