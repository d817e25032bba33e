export interface WeightedFit {
	/** Coefficients about x0: `c0 + c1·(x − x0) + …`. */
	c: number[];
	/** Standard uncertainty of c0 by the weighted scatter about the fit; NaN where no point is to spare. */
	u: number;
}

/** Solves the symmetric positive system by elimination, for two right-hand sides; null where it has no single solution. */
function solve(matrix: number[][], right: number[][]): number[][] | null {
	const size = matrix.length;
	const a = matrix.map((row, i) => [...row, ...right.map((side) => side[i]!)]);
	for (let k = 0; k < size; k++) {
		const pivot = a[k]![k]!;
		if (!(pivot > 1e-12)) return null;
		for (let i = k + 1; i < size; i++) {
			const factor = a[i]![k]! / pivot;
			for (let j = k; j < a[i]!.length; j++) a[i]![j]! -= factor * a[k]![j]!;
		}
	}
	return right.map((_, side) => {
		const x = new Array<number>(size).fill(0);
		for (let i = size - 1; i >= 0; i--) {
			let sum = a[i]![size + side]!;
			for (let j = i + 1; j < size; j++) sum -= a[i]![j]! * x[j]!;
			x[i] = sum / a[i]![i]!;
		}
		return x;
	});
}

/**
 * Weighted least-squares polynomial about a point, with the uncertainty of its value there.
 *
 * x is scaled to ±1 over the window, where normal equations up to the third degree lose nothing that matters.
 *
 * @param w weight of each point: the number of samples behind it
 * @param from @param to half-open range of points @param x0 where the value is wanted @param degree 0 to 3
 * @returns null where there are too few points for the degree
 */
export function weightedFit(
	x: Float64Array,
	y: Float64Array,
	w: Float64Array,
	from: number,
	to: number,
	x0: number,
	degree: number
): WeightedFit | null {
	const size = degree + 1;
	if (to - from < size) return null;
	let reach = 0;
	let total = 0;
	for (let i = from; i < to; i++) {
		reach = Math.max(reach, Math.abs(x[i]! - x0));
		total += w[i]!;
	}
	if (reach === 0) reach = 1;
	const moments = new Array<number>(2 * degree + 1).fill(0);
	const right = new Array<number>(size).fill(0);
	for (let i = from; i < to; i++) {
		const dx = (x[i]! - x0) / reach;
		const weight = w[i]! / total;
		for (let k = 0, power = weight; k <= 2 * degree; k++, power *= dx) {
			moments[k]! += power;
			if (k < size) right[k]! += power * y[i]!;
		}
	}
	const matrix = Array.from({ length: size }, (_, i) =>
		Array.from({ length: size }, (_, j) => moments[i + j]!)
	);
	const unit = Array.from({ length: size }, (_, i) => (i === 0 ? 1 : 0));
	const solved = solve(matrix, [right, unit]);
	if (!solved) return null;
	const [scaled, inverse] = solved as [number[], number[]];
	let squares = 0;
	for (let i = from; i < to; i++) {
		const dx = (x[i]! - x0) / reach;
		let fitted = 0;
		for (let k = degree; k >= 0; k--) fitted = fitted * dx + scaled[k]!;
		squares += (w[i]! / total) * (y[i]! - fitted) ** 2;
	}
	const spare = to - from - size;
	return {
		c: scaled.map((value, k) => value / reach ** k),
		u: spare > 0 ? Math.sqrt((squares / spare) * Math.max(inverse[0]!, 0)) : NaN
	};
}
