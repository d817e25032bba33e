/**
 * Trapezoid integral over time.
 * @param timeS s, ascending; steps at or below zero count nothing
 * @param values any quantity per second
 * @param maxGapS a step longer than this is a hole in the record and counts nothing; default: none is
 * @returns value·s, with how much time was integrated and how much was left out (unknown samples, holes), s
 */
export function integrate(
	timeS: ArrayLike<number>,
	values: ArrayLike<number>,
	maxGapS = Infinity
): { total: number; coveredS: number; leftOutS: number } {
	let total = 0;
	let coveredS = 0;
	let leftOutS = 0;
	for (let i = 1; i < timeS.length; i++) {
		const step = timeS[i]! - timeS[i - 1]!;
		if (!(step > 0)) continue;
		const mean = (values[i]! + values[i - 1]!) / 2;
		if (step > maxGapS || !Number.isFinite(mean)) leftOutS += step;
		else {
			total += mean * step;
			coveredS += step;
		}
	}
	return { total, coveredS, leftOutS };
}

/** Work done, net of motoring. @param timeS s @param powerKw kW @param maxGapS see `integrate` @returns MJ */
export function workMj(timeS: ArrayLike<number>, powerKw: ArrayLike<number>, maxGapS?: number): number {
	return integrate(timeS, powerKw, maxGapS).total / 1000;
}

/** Mass that has flowed. @param timeS s @param flowKgH kg/h @param maxGapS see `integrate` @returns kg */
export function massKg(timeS: ArrayLike<number>, flowKgH: ArrayLike<number>, maxGapS?: number): number {
	return integrate(timeS, flowKgH, maxGapS).total / 3600;
}
