import type { ProposedColumn } from '$lib/domain/trace';
import { draftOf, type DraftColumn } from './map-draft';

/** What was chosen stays while the server tries it, and when it asks again. */
export class MapDrafts {
	readonly #kept: Record<string, DraftColumn[]> = {};

	of(trace: string, proposal: readonly ProposedColumn[]): DraftColumn[] {
		const kept = this.#kept[trace];
		if (kept?.length === proposal.length) return kept;
		const made = $state(draftOf(proposal));
		this.#kept[trace] = made;
		return made;
	}
}
