import type { ChannelInfo } from '../model';

/**
 * The stored trace: one object that a chart reads in pieces.
 *
 * `TRNC`, version, length of the header, 0 (four 32-bit words), then the header as JSON padded with blanks to eight bytes, then
 * arrays at the header's offsets (from the end of the header): time as 64-bit floats, each channel as 32-bit floats (64-bit where
 * those would lose digits that matter), and for both their levels: lowest and highest of each block of 64, 4096, … samples; for time
 * the first of each block. All little-endian, each array at a multiple of eight bytes.
 */
export const MAGIC = 0x434e5254;
export const VERSION = 1;
export const PREFIX_BYTES = 16;
export const FACTOR = 64;

export type FloatType = 'f32' | 'f64';

interface StoredLevel {
	/** Samples in a block. */
	block: number;
	count: number;
	lo: number;
	hi: number;
}

export interface StoredChannel extends ChannelInfo {
	type: FloatType;
	offset: number;
	levels: StoredLevel[];
}

export interface StoredHeader {
	rows: number;
	/** `row`: there is no clock, rows are points; the time array counts them. */
	clock: 'time' | 'row';
	time: { offset: number; levels: { block: number; count: number; offset: number }[] };
	channels: StoredChannel[];
}

export const bytesOf = (type: FloatType) => (type === 'f32' ? 4 : 8);
export const padded = (bytes: number) => Math.ceil(bytes / 8) * 8;

export function floatsOf(bytes: Uint8Array, type: FloatType): Float32Array | Float64Array {
	// A copy starts at an aligned address, whatever the store handed over (a Buffer's own slice() would be a view).
	const copy = Uint8Array.from(bytes).buffer;
	return type === 'f32' ? new Float32Array(copy) : new Float64Array(copy);
}

/** Block sizes of the levels of so many rows: 64, 4096, … while a level still has more than one block. */
export function blockSizes(rows: number): number[] {
	const sizes: number[] = [];
	for (let block = FACTOR; block < rows; block *= FACTOR) sizes.push(block);
	return sizes;
}
