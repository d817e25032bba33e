type Points = readonly (readonly [x: number, y: number])[];

interface LimitPath {
	/** The limit, held flat a little past its ends as the judge holds it. */
	line: string;
	/** What is not allowed: above it for `at most`, below it for `at least`. */
	beyond: string;
	xs: [from: number, to: number];
	ys: [from: number, to: number];
}

const PAST_ENDS = 0.08;

/** A limit's table drawn into a box of `width` × `height`; points in rising order. Null without a point. */
export function limitPath(points: Points, isUpper: boolean, width: number, height: number): LimitPath | null {
	const [first, last] = [points[0], points.at(-1)];
	if (!first || !last) return null;
	const spanX = last[0] - first[0] || Math.abs(first[0]) || 1;
	const xs: [number, number] = [first[0] - PAST_ENDS * spanX, last[0] + PAST_ENDS * spanX];
	const values = points.map(([, y]) => y);
	const [low, high] = [Math.min(...values), Math.max(...values)];
	const spanY = high - low || Math.abs(high) || 1;
	const ys: [number, number] = [low - 0.25 * spanY, high + 0.25 * spanY];
	const px = (x: number) => (((x - xs[0]) / (xs[1] - xs[0])) * width).toFixed(1);
	const py = (y: number) => (height - ((y - ys[0]) / (ys[1] - ys[0])) * height).toFixed(1);
	const drawn: Points = [[xs[0], first[1]], ...points, [xs[1], last[1]]];
	const line = drawn.map(([x, y], at) => `${at === 0 ? 'M' : 'L'}${px(x)} ${py(y)}`).join('');
	return { line, beyond: `${line}V${isUpper ? 0 : height}H0Z`, xs: [first[0], last[0]], ys: [low, high] };
}
