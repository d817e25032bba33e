import {
	blockSizes,
	FACTOR,
	MAGIC,
	padded,
	PREFIX_BYTES,
	VERSION,
	type FloatType,
	type StoredHeader
} from './columnar-format';
import { channelInfo, type Trace } from './trace';

type Floats = Float32Array | Float64Array;

/** 32 bits hold seven digits; a channel that needs more of its own range keeps 64. */
function storedType(values: Float64Array): FloatType {
	let [lo, hi, worst] = [Infinity, -Infinity, 0];
	for (const value of values) {
		if (value < lo) lo = value;
		if (value > hi) hi = value;
		const error = Math.abs(value - Math.fround(value));
		if (error > worst) worst = error;
	}
	return worst > 1e-5 * (hi - lo) && hi > lo ? 'f64' : 'f32';
}

interface Level {
	lo: Floats;
	hi: Floats;
}

/** Lowest and highest of each block; each level is made of the one below it. A block of unknown samples is NaN. */
function levelsOf(values: Floats, sizes: readonly number[]): Level[] {
	const make = (count: number) =>
		values instanceof Float32Array ? new Float32Array(count) : new Float64Array(count);
	const levels: Level[] = [];
	let below: Level = { lo: values, hi: values };
	for (const size of sizes) {
		const count = Math.ceil(values.length / size);
		const level = { lo: make(count), hi: make(count) };
		for (let block = 0; block < count; block++) {
			let [lo, hi] = [Infinity, -Infinity];
			const end = Math.min((block + 1) * FACTOR, below.lo.length);
			for (let i = block * FACTOR; i < end; i++) {
				if (below.lo[i]! < lo) lo = below.lo[i]!;
				if (below.hi[i]! > hi) hi = below.hi[i]!;
			}
			level.lo[block] = lo <= hi ? lo : NaN;
			level.hi[block] = lo <= hi ? hi : NaN;
		}
		levels.push(level);
		below = level;
	}
	return levels;
}

/** Gives each array its place and keeps them in order. */
class Layout {
	readonly arrays: Floats[] = [];
	#end = 0;

	place(array: Floats): number {
		const offset = this.#end;
		this.arrays.push(array);
		this.#end = padded(offset + array.byteLength);
		return offset;
	}

	get bytes(): number {
		return this.#end;
	}
}

/**
 * Encodes a trace as one binary object (`columnar-format.ts`) with levels of lowest and highest values.
 *
 * @param trace samples in internal units; a table of points is stored over its row count in place of a clock
 */
export function encodeColumnar(trace: Trace): Uint8Array {
	const sizes = blockSizes(trace.rows);
	const time = trace.time ?? Float64Array.from({ length: trace.rows }, (_, row) => row);
	const layout = new Layout();
	const header: StoredHeader = {
		rows: trace.rows,
		clock: trace.time ? 'time' : 'row',
		time: {
			offset: layout.place(time),
			levels: sizes.map((block) => {
				const firsts = Float64Array.from(
					{ length: Math.ceil(trace.rows / block) },
					(_, k) => time[k * block]!
				);
				return { block, count: firsts.length, offset: layout.place(firsts) };
			})
		},
		channels: trace.columns.map((column) => {
			const type = storedType(column.values);
			const values = type === 'f32' ? Float32Array.from(column.values) : column.values;
			const offset = layout.place(values);
			const levels = levelsOf(values, sizes).map(({ lo, hi }, k) => ({
				block: sizes[k]!,
				count: lo.length,
				lo: layout.place(lo),
				hi: layout.place(hi)
			}));
			return { ...channelInfo(column), type, offset, levels };
		})
	};
	const text = new TextEncoder().encode(JSON.stringify(header));
	const headerBytes = padded(text.length);
	const bytes = new Uint8Array(PREFIX_BYTES + headerBytes + layout.bytes);
	const prefix = new DataView(bytes.buffer);
	prefix.setUint32(0, MAGIC, true);
	prefix.setUint32(4, VERSION, true);
	prefix.setUint32(8, headerBytes, true);
	bytes.fill(32, PREFIX_BYTES, PREFIX_BYTES + headerBytes);
	bytes.set(text, PREFIX_BYTES);
	let at = PREFIX_BYTES + headerBytes;
	for (const array of layout.arrays) {
		bytes.set(new Uint8Array(array.buffer, array.byteOffset, array.byteLength), at);
		at += padded(array.byteLength);
	}
	return bytes;
}
