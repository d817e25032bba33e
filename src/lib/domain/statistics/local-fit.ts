/**
 * Least-squares polynomial over a stretch of samples, as coefficients about a point: `y ≈ c0 + c1·(x − x0) + c2·(x − x0)²`. So c0 is the
 * smoothed value at x0 and c1 its slope.
 *
 * Solved by modified Gram-Schmidt on powers of the x scaled to ±1, which keeps 1e-12 where normal equations on raw x lose all digits.
 *
 * @param x @param y equal lengths; a pair with an unknown member is left out
 * @param from @param to half-open index range @param x0 the point @param degree 0 to 4
 * @param least fewest known samples; default one more than the degree
 * @returns degree + 1 coefficients, or null where there are too few samples or too few different x
 */
export function fitAt(
	x: ArrayLike<number>,
	y: ArrayLike<number>,
	from: number,
	to: number,
	x0: number,
	degree: number,
	least = degree + 1
): number[] | null {
	const xs: number[] = [];
	const ys: number[] = [];
	let reach = 0;
	for (let i = from; i < to; i++) {
		if (!Number.isFinite(x[i]! + y[i]!)) continue;
		xs.push(x[i]! - x0);
		ys.push(y[i]!);
		reach = Math.max(reach, Math.abs(x[i]! - x0));
	}
	if (xs.length < Math.max(least, degree + 1)) return null;
	if (reach === 0) return degree === 0 ? [ys.reduce((sum, value) => sum + value, 0) / ys.length] : null;
	const columns = Array.from({ length: degree + 1 }, (_, power) =>
		Float64Array.from(xs, (value) => (value / reach) ** power)
	);
	const scaled = leastSquares(columns, ys);
	return scaled && scaled.map((coefficient, power) => coefficient / reach ** power);
}

const dot = (a: ArrayLike<number>, b: ArrayLike<number>) => {
	let sum = 0;
	for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
	return sum;
};

/** Solves `columns · c ≈ y`; null where the columns are not independent. */
function leastSquares(columns: Float64Array[], y: readonly number[]): number[] | null {
	const size = columns.length;
	const rest = Float64Array.from(y);
	const r = columns.map(() => new Array<number>(size).fill(0));
	const projected = new Array<number>(size).fill(0);
	for (let j = 0; j < size; j++) {
		const column = columns[j]!;
		const before = Math.sqrt(dot(column, column));
		// Twice is enough: the second pass removes what rounding left of the first.
		for (let pass = 0; pass < 2; pass++)
			for (let k = 0; k < j; k++) {
				const q = columns[k]!;
				const share = dot(q, column);
				r[k]![j]! += share;
				for (let i = 0; i < column.length; i++) column[i]! -= share * q[i]!;
			}
		const norm = Math.sqrt(dot(column, column));
		if (!(norm > 1e-12 * before)) return null;
		r[j]![j] = norm;
		for (let i = 0; i < column.length; i++) column[i]! /= norm;
		for (let pass = 0; pass < 2; pass++) {
			const share = dot(column, rest);
			projected[j]! += share;
			for (let i = 0; i < rest.length; i++) rest[i]! -= share * column[i]!;
		}
	}
	const c = new Array<number>(size).fill(0);
	for (let j = size - 1; j >= 0; j--) {
		let sum = projected[j]!;
		for (let k = j + 1; k < size; k++) sum -= r[j]![k]! * c[k]!;
		c[j] = sum / r[j]![j]!;
	}
	return c;
}

/**
 * Value and slope at a point of the quadratic fitted by least squares to the samples about it: `fitAt` of degree 2 without its storage, for
 * one fit per sample. Moments are taken about x0 and the sample there and scaled to ±1, so normal equations are safe.
 *
 * @param from @param to half-open index range @param least fewest known samples, at least 3
 * @returns [value, slope], or null where there are too few samples or too few different x
 */
export function quadraticAt(
	x: ArrayLike<number>,
	y: ArrayLike<number>,
	from: number,
	to: number,
	x0: number,
	least: number
): readonly [value: number, slope: number] | null {
	const reach = Math.max(Math.abs(x[from]! - x0), Math.abs(x[to - 1]! - x0));
	if (!(reach > 0)) return null;
	let base = NaN;
	let [n, s1, s2, s3, s4, b0, b1, b2] = [0, 0, 0, 0, 0, 0, 0, 0];
	for (let i = from; i < to; i++) {
		const v = y[i]!;
		const u = (x[i]! - x0) / reach;
		if (!Number.isFinite(v + u)) continue;
		if (n === 0) base = v;
		const w = v - base;
		const uu = u * u;
		n++;
		s1 += u;
		s2 += uu;
		s3 += uu * u;
		s4 += uu * uu;
		b0 += w;
		b1 += w * u;
		b2 += w * uu;
	}
	if (n < Math.max(3, least)) return null;
	const [m00, m01, m02] = [s2 * s4 - s3 * s3, s2 * s3 - s1 * s4, s1 * s3 - s2 * s2];
	const determinant = n * m00 + s1 * m01 + s2 * m02;
	if (!(determinant > 1e-12 * n * s2 * s4)) return null;
	const value = (b0 * m00 + b1 * m01 + b2 * m02) / determinant;
	const slope = (b0 * m01 + b1 * (n * s4 - s2 * s2) + b2 * (s1 * s2 - n * s3)) / determinant;
	return [base + value, slope / reach];
}
