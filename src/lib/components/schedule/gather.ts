import { formatCount } from '$lib/domain/display/format';
import type { DrawnEntry } from './entries';

/** Requests hold nothing, so several may want the same time. */
const isRequest = ({ kind, test }: DrawnEntry) => kind === 'requested' && test !== null;

/**
 * Requests of a cell that overlap one another as one bar, `3 requests`, for columns too narrow to set them side by side.
 * @param held a bar that is being put elsewhere: it stays by itself
 */
export function gathered(entries: readonly DrawnEntry[], held: string | null): readonly DrawnEntry[] {
	const requests = entries
		.filter((entry) => isRequest(entry) && entry.id !== held)
		.sort((a, b) => a.cell.localeCompare(b.cell) || a.from.localeCompare(b.from));
	const heaps: DrawnEntry[][] = [];
	let end = '';
	for (const entry of requests) {
		const heap = heaps.at(-1);
		if (heap && heap[0]!.cell === entry.cell && entry.from < end) {
			heap.push(entry);
			end = entry.to > end ? entry.to : end;
		} else {
			heaps.push([entry]);
			end = entry.to;
		}
	}
	const several = heaps.filter(({ length }) => length > 1);
	if (several.length === 0) return entries;
	const hidden = new Set(several.flatMap((heap) => heap.map(({ id }) => id)));
	return [
		...entries.filter(({ id, kind }) => !id || !hidden.has(id) || kind === 'closed'),
		...several.map((heap): DrawnEntry => {
			const [first] = heap as [DrawnEntry];
			return {
				key: `requests ${first.cell} ${first.from}`,
				cell: first.cell,
				kind: 'requested',
				from: first.from,
				to: heap.reduce((latest, { to }) => (to > latest ? to : latest), first.to),
				title: formatCount(heap.length, 'request'),
				id: null,
				test: null
			};
		})
	];
}
