import { median } from './moments';

/** Makes a median absolute deviation an estimate of a normal distribution's standard deviation. */
const MAD_TO_SD = 1.482602218505602;

/**
 * Spikes by the Hampel identifier: a sample further than `threshold` robust standard deviations (1.4826·MAD) from the median of its
 * window, its own value included.
 *
 * @param values samples; unknown ones are neither judged nor counted
 * @param halfWidth samples on each side; at the ends the window is cut
 * @param threshold in robust standard deviations; default 3
 * @param floor least distance that counts, in the values' unit: keeps a quiet or quantised channel from being all spikes
 * @returns 1 at each spike
 */
export function hampelSpikes(
	values: ArrayLike<number>,
	halfWidth: number,
	threshold = 3,
	floor = 0
): Uint8Array {
	const spikes = new Uint8Array(values.length);
	for (let i = 0; i < values.length; i++) {
		if (!Number.isFinite(values[i])) continue;
		const window: number[] = [];
		const end = Math.min(values.length - 1, i + halfWidth);
		for (let j = Math.max(0, i - halfWidth); j <= end; j++)
			if (Number.isFinite(values[j])) window.push(values[j]!);
		if (window.length < 3) continue;
		const middle = median(window);
		const scale = MAD_TO_SD * median(window.map((value) => Math.abs(value - middle)));
		const distance = Math.abs(values[i]! - middle);
		if (distance > Math.max(threshold * scale, floor) && distance > 0) spikes[i] = 1;
	}
	return spikes;
}
