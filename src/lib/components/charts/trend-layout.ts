import { labMidnightMs } from '$lib/domain/display/clock';

export interface TrendGroup {
	key: string;
	n: number;
	mean: number;
	ci95: readonly [lo: number, hi: number] | null;
}

export interface TrendPoint {
	run: string;
	group: string;
	/** ISO 8601. */
	at: string;
	value: number;
	u: number | null;
}

export interface Ticks {
	low: number;
	high: number;
	values: number[];
	/** Decimals that tell neighbouring ticks apart. */
	decimals: number;
}

/** About `wanted` round values (steps of 1, 2 or 5) over all values with a little room at both ends. */
export function niceTicks(values: readonly number[], wanted: number): Ticks {
	let [least, most] = [Infinity, -Infinity];
	for (const value of values) {
		if (!Number.isFinite(value)) continue;
		least = Math.min(least, value);
		most = Math.max(most, value);
	}
	if (least > most) return { low: 0, high: 1, values: [0, 1], decimals: 0 };
	const range = most > least ? most - least : Math.max(Math.abs(most) * 0.1, 1e-6);
	const [low, high] = [(least + most) / 2 - range * 0.56, (least + most) / 2 + range * 0.56];
	const rough = (high - low) / wanted;
	const power = 10 ** Math.floor(Math.log10(rough));
	const step = ([1, 2, 5].find((one) => one * power >= rough * 0.75) ?? 10) * power;
	const first = Math.ceil(low / step - 1e-9);
	const count = Math.floor(high / step + 1e-9) - first + 1;
	const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
	const ticks = Array.from({ length: Math.max(0, count) }, (_, n) =>
		Number(((first + n) * step).toFixed(Math.min(decimals, 20)))
	);
	return { low, high, values: ticks, decimals };
}

/**
 * Where the n-th point of a group stands across its column, −0.5 … 0.5: spread by the golden ratio, so that neighbours in
 * time do not cover one another and the picture is the same each time.
 */
export const spreadOf = (n: number): number => (n === 0 ? 0 : ((n * 0.618033988749895 + 0.5) % 1) - 0.5);

/**
 * Each run with the place of its group and how far aside of the group's middle it stands (−0.5 … 0.5), in the order in
 * which the arrow keys go: over time, or group by group and the oldest first.
 * @param points oldest first
 */
export function placePoints(
	points: readonly TrendPoint[],
	groups: readonly TrendGroup[],
	isTime: boolean
): (TrendPoint & { place: number; aside: number })[] {
	const order = new Map(groups.map(({ key }, at) => [key, at]));
	const counts = groups.map(() => 0);
	const placed = points.map((point) => {
		const place = order.get(point.group) ?? 0;
		const n = counts[place] ?? 0;
		counts[place] = n + 1;
		return { ...point, place, aside: spreadOf(n) };
	});
	return isTime ? placed : placed.sort((a, b) => a.place - b.place);
}

/**
 * What the axis has to hold: all runs, and intervals as far as twice the runs' own range. An interval of two runs can be
 * many times wider; to hold it whole would press the runs into a line.
 */
export function shownValues(points: readonly TrendPoint[], groups: readonly TrendGroup[]): number[] {
	const values = [...points.map(({ value }) => value), ...groups.map(({ mean }) => mean)];
	let [least, most] = [Infinity, -Infinity];
	for (const value of values) {
		least = Math.min(least, value);
		most = Math.max(most, value);
	}
	const room = (most - least) / 2;
	for (const { ci95 } of groups)
		if (ci95) values.push(Math.max(ci95[0], least - room), Math.min(ci95[1], most + room));
	return values;
}

const DAY_MS = 86_400_000;
const STEPS_DAYS = [1, 2, 7, 14];
const STEPS_MONTHS = [1, 2, 3, 6, 12, 24, 60, 120];

/** First instants of days or months of the lab's clock, at most `most` of them. */
export function timeTicks(
	fromMs: number,
	toMs: number,
	most: number,
	zone: string
): { at: number; day: string }[] {
	const days = (toMs - fromMs) / DAY_MS;
	const byDays = STEPS_DAYS.find((step) => days / step <= most);
	const first = new Date(fromMs);
	const starts: number[] = [];
	if (byDays !== undefined) {
		const whole = Math.ceil(fromMs / DAY_MS / byDays - 1) * byDays;
		for (let day = whole; day * DAY_MS <= toMs + DAY_MS; day += byDays) starts.push(day * DAY_MS);
	} else {
		const step = STEPS_MONTHS.find((months) => days / 30.4 / months <= most) ?? 240;
		const from = Math.floor((first.getUTCFullYear() * 12 + first.getUTCMonth()) / step) * step;
		for (let n = from; ; n += step) {
			const start = Date.UTC(Math.floor(n / 12), n % 12);
			if (start > toMs + DAY_MS) break;
			starts.push(start);
		}
	}
	return starts
		.map((start) => ({ at: labMidnightMs(start, zone), day: new Date(start).toISOString().slice(0, 10) }))
		.filter(({ at }) => at >= fromMs && at <= toMs);
}

export interface Place {
	cx: number;
	cy: number;
}

/** The place nearest to a pointer, no further than `within` px; −1 where there is none. */
export function nearest(places: readonly Place[], x: number, y: number, within: number): number {
	let [found, best] = [-1, within * within];
	places.forEach(({ cx, cy }, at) => {
		const distance = (cx - x) ** 2 + (cy - y) ** 2;
		if (distance <= best) [found, best] = [at, distance];
	});
	return found;
}
