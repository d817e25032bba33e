export interface Listing<T> {
	items: T[];
	nextCursor: string | null;
	/** How many there are over all pages. */
	total: number;
}

const PAGE_ROWS = 50;

/**
 * One page of a short list that is read as a whole (cells, limit sets: tens, not thousands), as its address asks for it:
 * `?sort=-power&cursor=50`. What an address asks for and there is not is left out.
 * @param sorts by which each name of the address sorts; without one the rows stay as they come
 */
export function listing<T>(
	rows: readonly T[],
	url: URL,
	sorts: Readonly<Record<string, (row: T) => string | number>>,
	pageRows = PAGE_ROWS
): Listing<T> {
	const asked = url.searchParams.get('sort') ?? '';
	const by = sorts[asked.replace(/^-/, '')];
	const sign = asked.startsWith('-') ? -1 : 1;
	const ordered = by ? [...rows].sort((a, b) => sign * compared(by(a), by(b))) : rows;
	const start = Math.trunc(Number(url.searchParams.get('cursor') ?? 0));
	const from = Number.isFinite(start) && start > 0 && start < rows.length ? start : 0;
	const end = from + pageRows;
	return {
		items: ordered.slice(from, end),
		nextCursor: end < rows.length ? String(end) : null,
		total: rows.length
	};
}

function compared(a: string | number, b: string | number): number {
	return typeof a === 'number' && typeof b === 'number' ? a - b : String(a).localeCompare(String(b));
}
