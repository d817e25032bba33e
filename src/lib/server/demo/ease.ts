/** 0 before `from`, 1 after `to`, without a corner. */
export function ease(from: number, to: number, x: number): number {
	const s = Math.min(Math.max((x - from) / (to - from), 0), 1);
	return s * s * (3 - 2 * s);
}
