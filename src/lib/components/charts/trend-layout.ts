export interface TrendGroup {
	key: string;
	n: number;
	mean: number;
	/** Null where n is 1. */
	sd: number | null;
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
	const finite = values.filter(Number.isFinite);
	if (finite.length === 0) return { low: 0, high: 1, values: [0, 1], decimals: 0 };
	const [least, most] = [Math.min(...finite), Math.max(...finite)];
	const range = most > least ? most - least : Math.max(Math.abs(most) * 0.1, 1e-6);
	const [low, high] = [(least + most) / 2 - range * 0.56, (least + most) / 2 + range * 0.56];
	const rough = (high - low) / wanted;
	const power = 10 ** Math.floor(Math.log10(rough));
	const step = ([1, 2, 5].find((one) => one * power >= rough) ?? 10) * power;
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
