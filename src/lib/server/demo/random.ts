/**
 * Numbers that look random and are the same for the same seed: a Weyl sequence through 32-bit multiply and xor-shift mixing.
 * For noise of the demo lab's sensors only, never for secrets.
 */
export interface Random {
	/** Even over 0 to 1. */
	even(): number;
	/** Of mean 0 and standard deviation 1. */
	normal(): number;
}

export function seededRandom(seed: string): Random {
	let state = hashOf(seed);
	let spare: number | null = null;
	const even = () => {
		state = (state + 0x6d2b79f5) | 0;
		let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
		mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
	};
	// Polar form of the Box-Muller transform: two independent numbers at a time.
	const normal = () => {
		if (spare !== null) {
			const kept = spare;
			spare = null;
			return kept;
		}
		for (;;) {
			const [x, y] = [2 * even() - 1, 2 * even() - 1];
			const square = x * x + y * y;
			if (square === 0 || square >= 1) continue;
			const scale = Math.sqrt((-2 * Math.log(square)) / square);
			spare = y * scale;
			return x * scale;
		}
	};
	return { even, normal };
}

/** FNV-1a over the text's UTF-16 units, 32 bits. */
function hashOf(text: string): number {
	let hash = 0x811c9dc5;
	for (let i = 0; i < text.length; i++) hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193);
	return hash | 0;
}
