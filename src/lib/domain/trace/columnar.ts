import type { ChannelInfo } from '../model';
import {
	bytesOf,
	floatsOf,
	MAGIC,
	PREFIX_BYTES,
	VERSION,
	type StoredChannel,
	type StoredHeader
} from './columnar-format';

/** Reads a stretch of the stored object. */
type ReadRange = (from: number, length: number) => Promise<Uint8Array>;

interface WindowRequest {
	/** Codes of the channels wanted. */
	channels: readonly string[];
	/** s on the trace clock; left out, the trace's own ends. Samples at both ends belong to the window. */
	from?: number | undefined;
	to?: number | undefined;
	/** Most buckets in the answer; with no more samples than that, the samples themselves. */
	points: number;
}

interface WindowChannel {
	code: string;
	unit: string;
	/** Lowest and highest known sample of each bucket; null where a bucket has none. Equal where the answer is samples. */
	lo: (number | null)[];
	hi: (number | null)[];
}

export interface TraceWindow {
	mode: 'samples' | 'envelope';
	/** `row` where the trace is a table of points without a clock. */
	clock: 'time' | 'row';
	from: number;
	to: number;
	/** Samples in the window. */
	samples: number;
	/** Time of the first sample of each bucket; a bucket reaches up to the next one's. */
	time: number[];
	channels: WindowChannel[];
}

interface OpenColumnar {
	rows: number;
	channels: ChannelInfo[];
	/** First and last time, s. */
	range(): Promise<[number, number]>;
	window(request: WindowRequest): Promise<TraceWindow>;
}

const DAMAGED = 'This is not a stored trace, or it is damaged.';

/** Which samples make each bucket, and from which level they are read. */
interface Plan {
	/** First sample of each bucket, and one past the last. */
	edges: number[];
	/** Level of blocks, −1 for the samples themselves. */
	level: number;
}

/**
 * Cuts samples `from` up to `to` into buckets. Where a bucket holds many, inner edges fall on whole blocks of the coarsest level
 * whose blocks are no longer than a bucket, so that every bucket's extremes are exact for the samples that it holds.
 */
function plan(from: number, to: number, points: number, blocks: readonly number[]): Plan {
	const count = to - from;
	if (count <= points) return { edges: Array.from({ length: count + 1 }, (_, k) => from + k), level: -1 };
	const width = count / points;
	const level = blocks.findLastIndex((block) => block <= width);
	const block = level < 0 ? 1 : blocks[level]!;
	const edges = [from];
	for (let k = 1; k < points; k++) edges.push(Math.round((from + k * width) / block) * block);
	edges.push(to);
	return { edges, level };
}

/**
 * Opens a stored trace for reading in pieces.
 *
 * @param readRange reads bytes of the object; never asked for more than it holds
 * @throws where the object is no stored trace: it was written by this system, so that is damage
 */
export async function openColumnar(readRange: ReadRange): Promise<OpenColumnar> {
	const prefix = await readRange(0, PREFIX_BYTES);
	const words = new DataView(prefix.buffer, prefix.byteOffset, prefix.byteLength);
	if (
		prefix.byteLength < PREFIX_BYTES ||
		words.getUint32(0, true) !== MAGIC ||
		words.getUint32(4, true) !== VERSION
	)
		throw new Error(DAMAGED);
	const headerBytes = words.getUint32(8, true);
	const header = JSON.parse(
		new TextDecoder().decode(await readRange(PREFIX_BYTES, headerBytes))
	) as StoredHeader;
	return new Reader(header, PREFIX_BYTES + headerBytes, readRange);
}

class Reader implements OpenColumnar {
	readonly rows: number;
	readonly channels: ChannelInfo[];

	constructor(
		private readonly header: StoredHeader,
		private readonly base: number,
		private readonly readRange: ReadRange
	) {
		this.rows = header.rows;
		this.channels = header.channels.map(({ code, header: name, unit, sourceUnit, confidence }) => ({
			code,
			header: name,
			unit,
			sourceUnit,
			confidence
		}));
	}

	async #floats(
		offset: number,
		type: 'f32' | 'f64',
		from: number,
		to: number
	): Promise<Float32Array | Float64Array> {
		if (to <= from) return new Float64Array();
		const size = bytesOf(type);
		return floatsOf(await this.readRange(this.base + offset + from * size, (to - from) * size), type);
	}

	#times(from: number, to: number) {
		return this.#floats(this.header.time.offset, 'f64', from, to);
	}

	async range(): Promise<[number, number]> {
		const [first] = await this.#times(0, Math.min(1, this.rows));
		const [last] = await this.#times(Math.max(0, this.rows - 1), this.rows);
		return [first ?? 0, last ?? 0];
	}

	/** First sample whose time passes the test; times never fall, so each level narrows it to one block of the next. */
	async #firstWhere(passes: (time: number) => boolean): Promise<number> {
		const levels = [...this.header.time.levels].reverse();
		let from = 0;
		let to = this.rows;
		for (const { block, offset } of levels) {
			const firstBlock = Math.floor(from / block);
			const lastBlock = Math.ceil(to / block);
			const firsts = await this.#floats(offset, 'f64', firstBlock, lastBlock);
			const at = firsts.findIndex(passes);
			// The sample is at the start of that block or inside the one before.
			if (at >= 0) to = Math.min(to, (firstBlock + at) * block + 1);
			const before = at < 0 ? lastBlock - 1 : firstBlock + at - 1;
			from = Math.max(from, before * block);
		}
		const times = await this.#times(from, to);
		const at = times.findIndex(passes);
		return at < 0 ? to : from + at;
	}

	async window(request: WindowRequest): Promise<TraceWindow> {
		const points = Math.max(1, Math.floor(request.points));
		const [start, end] = await this.range();
		const lo = request.from ?? start;
		const hi = request.to ?? end;
		const from = lo <= start ? 0 : await this.#firstWhere((time) => time >= lo);
		const to = hi >= end ? this.rows : await this.#firstWhere((time) => time > hi);
		const { edges, level } = plan(
			from,
			Math.max(from, to),
			points,
			this.header.time.levels.map(({ block }) => block)
		);
		const chosen = request.channels.flatMap((code) =>
			this.header.channels.filter((channel) => channel.code === code)
		);
		const [time, channels] = await Promise.all([
			this.#bucketTimes(edges, level),
			Promise.all(chosen.map((channel) => this.#channel(channel, edges, level)))
		]);
		return {
			mode: edges.length - 1 === to - from ? 'samples' : 'envelope',
			clock: this.header.clock,
			from: lo,
			to: hi,
			samples: Math.max(0, to - from),
			time,
			channels
		};
	}

	async #bucketTimes(edges: readonly number[], level: number): Promise<number[]> {
		const from = edges[0]!;
		const starts = edges.slice(0, -1);
		if (level < 0) {
			const times = await this.#times(from, edges.at(-1)!);
			return starts.map((edge) => times[edge - from]!);
		}
		const { block, offset } = this.header.time.levels[level]!;
		const firstBlock = Math.ceil(from / block);
		const firsts = await this.#floats(offset, 'f64', firstBlock, Math.ceil(edges.at(-2)! / block) + 1);
		const [first] = await this.#times(from, from + 1);
		return starts.map((edge, k) => (k === 0 ? first! : firsts[edge / block - firstBlock]!));
	}

	async #channel(channel: StoredChannel, edges: readonly number[], level: number): Promise<WindowChannel> {
		const from = edges[0]!;
		const to = edges.at(-1)!;
		const { code, unit, type } = channel;
		const lo: (number | null)[] = [];
		const hi: (number | null)[] = [];
		const stored = level < 0 ? null : channel.levels[level]!;
		const block = stored?.block ?? 1;
		// Whole blocks from the level; what sticks out at both ends from the samples.
		const inner: [number, number] = stored ? [Math.ceil(from / block), Math.floor(to / block)] : [from, to];
		const [los, his, head, tail] = await Promise.all([
			this.#floats(stored?.lo ?? channel.offset, type, ...inner),
			stored ? this.#floats(stored.hi, type, ...inner) : null,
			this.#floats(channel.offset, type, from, inner[0] * block),
			this.#floats(channel.offset, type, inner[1] * block, to)
		]);
		for (let k = 0; k + 1 < edges.length; k++) {
			const extremes = new Extremes();
			if (k === 0) extremes.addAll(head, head, 0, head.length);
			const a = Math.max(Math.ceil(edges[k]! / block), inner[0]) - inner[0];
			const b = Math.min(Math.floor(edges[k + 1]! / block), inner[1]) - inner[0];
			extremes.addAll(los, his ?? los, a, b);
			if (k === edges.length - 2) extremes.addAll(tail, tail, 0, tail.length);
			lo.push(extremes.lo);
			hi.push(extremes.hi);
		}
		return { code, unit, lo, hi };
	}
}

/** Lowest and highest of what is known; a 32-bit value is shown with the seven digits that it has. */
class Extremes {
	#lo = Infinity;
	#hi = -Infinity;
	#digits = 7;

	addAll(los: Float32Array | Float64Array, his: Float32Array | Float64Array, from: number, to: number): void {
		if (los instanceof Float64Array && los.length > 0) this.#digits = 16;
		for (let i = from; i < to; i++) {
			if (los[i]! < this.#lo) this.#lo = los[i]!;
			if (his[i]! > this.#hi) this.#hi = his[i]!;
		}
	}

	get lo(): number | null {
		return this.#lo <= this.#hi ? Number(this.#lo.toPrecision(this.#digits)) : null;
	}

	get hi(): number | null {
		return this.#lo <= this.#hi ? Number(this.#hi.toPrecision(this.#digits)) : null;
	}
}
