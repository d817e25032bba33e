/** Makes a median absolute deviation an estimate of a normal distribution's standard deviation. */
const MAD_TO_SD = 1.482602218505602;

/** A window of known samples kept in order, so that moving it by one costs one insertion and one removal. */
class OrderedWindow {
	private readonly sorted: Float64Array;
	size = 0;

	constructor(capacity: number) {
		this.sorted = new Float64Array(capacity);
	}

	/** Index of the first sample not below `value`. */
	private placeOf(value: number): number {
		let lo = 0;
		let hi = this.size;
		while (lo < hi) {
			const middle = (lo + hi) >> 1;
			if (this.sorted[middle]! < value) lo = middle + 1;
			else hi = middle;
		}
		return lo;
	}

	add(value: number): void {
		const at = this.placeOf(value);
		this.sorted.copyWithin(at + 1, at, this.size);
		this.sorted[at] = value;
		this.size++;
	}

	remove(value: number): void {
		const at = this.placeOf(value);
		this.sorted.copyWithin(at, at + 1, this.size);
		this.size--;
	}

	median(): number {
		const half = this.size >> 1;
		return this.size % 2 === 1 ? this.sorted[half]! : (this.sorted[half - 1]! + this.sorted[half]!) / 2;
	}

	/** Median of the distances from `middle`: walks outwards from it, the nearer side first. */
	medianDistance(middle: number): number {
		const wanted = (this.size >> 1) + 1;
		let right = this.placeOf(middle);
		let left = right - 1;
		let before = 0;
		let nearest = 0;
		for (let taken = 0; taken < wanted; taken++) {
			const toLeft = left >= 0 ? middle - this.sorted[left]! : Infinity;
			const toRight = right < this.size ? this.sorted[right]! - middle : Infinity;
			before = nearest;
			nearest = Math.min(toLeft, toRight);
			if (toLeft <= toRight) left--;
			else right++;
		}
		return this.size % 2 === 1 ? nearest : (before + nearest) / 2;
	}
}

/**
 * Spikes by the Hampel identifier: a sample further than `threshold` robust standard deviations (1.4826·MAD) from the median of its
 * window, its own value included. Beside a sharp real step the samples of its shorter side look the same: keep the window shorter than
 * the quickest real change, or raise the floor.
 *
 * @param values samples; unknown ones are neither judged nor counted
 * @param halfWidth samples on each side, a whole number; at the ends the window is cut
 * @param threshold in robust standard deviations; default 3
 * @param floor least distance that counts, in the values' unit: keeps a quiet or quantised channel from being all spikes
 * @returns 1 at each spike; none where a window holds fewer than 3 known samples
 */
export function hampelSpikes(
	values: ArrayLike<number>,
	halfWidth: number,
	threshold = 3,
	floor = 0
): Uint8Array {
	const spikes = new Uint8Array(values.length);
	const window = new OrderedWindow(2 * halfWidth + 2);
	const known = (i: number) => i >= 0 && i < values.length && Number.isFinite(values[i]);
	for (let i = 0; i < Math.min(halfWidth, values.length); i++) if (known(i)) window.add(values[i]!);
	for (let i = 0; i < values.length; i++) {
		if (known(i + halfWidth)) window.add(values[i + halfWidth]!);
		if (known(i - halfWidth - 1)) window.remove(values[i - halfWidth - 1]!);
		if (!known(i) || window.size < 3) continue;
		const middle = window.median();
		const distance = Math.abs(values[i]! - middle);
		if (distance === 0 || distance <= floor) continue;
		if (distance > threshold * MAD_TO_SD * window.medianDistance(middle)) spikes[i] = 1;
	}
	return spikes;
}
