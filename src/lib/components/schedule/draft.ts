import type { Place } from './clash';
import type { DrawnEntry } from './entries';
import { laterOnTheWall } from './wall';

const MINUTE_MS = 60_000;
const lengthOf = ({ from, to }: DrawnEntry) => (Date.parse(`${to}Z`) - Date.parse(`${from}Z`)) / MINUTE_MS;

/** The schedule with one bar, and its rigging with it, where it is being put. */
export function withDraft(
	drawn: readonly DrawnEntry[],
	draft: (Place & { id: string }) | null
): readonly DrawnEntry[] {
	if (!draft) return drawn;
	const { id, cell, from, to } = draft;
	return drawn.map((entry) => {
		if (entry.id !== id) return entry;
		if (entry.kind === 'rig_up')
			return { ...entry, cell, from: laterOnTheWall(from, -lengthOf(entry)), to: from };
		if (entry.kind === 'rig_down')
			return { ...entry, cell, from: to, to: laterOnTheWall(to, lengthOf(entry)) };
		return { ...entry, cell, from, to };
	});
}
