import type { DraftColumn } from './map-draft';

/**
 * What was chosen in the map editors stays while the server tries it, and when it asks again. Knows nothing of channels and
 * units, so that a page without an editor need not load them.
 */
export class MapDrafts {
	readonly #kept: Record<string, DraftColumn[]> = {};

	/** @param make what the editor of this trace starts with */
	of(trace: string, make: () => DraftColumn[]): DraftColumn[] {
		const kept = this.#kept[trace];
		if (kept) return kept;
		const made = $state(make());
		this.#kept[trace] = made;
		return made;
	}
}
