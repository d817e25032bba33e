import { isEmptyPair, pastedPairs, typedNumber } from '../display/typed-number';

const MOST_POINTS = 500;

/** Points of torque over speed from what someone typed, or a sentence for each line that cannot be one. */
export function torqueLine(text: string): { points: [rpm: number, torqueNm: number][]; problems: string[] } {
	const points: [number, number][] = [];
	const problems: string[] = [];
	const rows = pastedPairs(text).filter((row) => !isEmptyPair(row));
	if (rows.length > MOST_POINTS) problems.push(`At most ${MOST_POINTS} points; these are ${rows.length}.`);
	rows.forEach(({ x, y }, at) => {
		const [rpm, torqueNm] = [typedNumber(x), typedNumber(y)];
		if (rpm === null || torqueNm === null || Number.isNaN(rpm + torqueNm))
			problems.push(`Row ${at + 1}: give a speed and a torque, both as plain numbers.`);
		else if (rpm < 0) problems.push(`Row ${at + 1}: a speed cannot be below zero.`);
		else points.push([rpm, torqueNm]);
	});
	points.sort((a, b) => a[0] - b[0]);
	const twice = points.find(([rpm], at) => at > 0 && rpm === points[at - 1]![0]);
	if (twice) problems.push(`The speed ${twice[0]} rev/min stands there twice.`);
	return { points, problems };
}

export const torqueText = (points: readonly (readonly [number, number])[] | null): string =>
	(points ?? []).map(([rpm, torqueNm]) => `${rpm};${torqueNm}`).join('\n');

/** Swept volume of all cylinders. @param boreMm mm @param strokeMm mm @returns L */
export const sweptVolumeL = (boreMm: number, strokeMm: number, cylinders: number): number =>
	((Math.PI / 4) * boreMm ** 2 * strokeMm * cylinders) / 1e6;
