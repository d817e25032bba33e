export interface Column {
	key: string;
	head: string;
	/** Printed once, in the head; a column with `unit` or `numeric` is set right. */
	unit?: string | undefined;
	numeric?: boolean | undefined;
	/** The name by which the address sorts on this column; none: not sortable. */
	sort?: string | undefined;
	/** A first click sorts the largest, or the latest, first; as a rule only numbers do. */
	largestFirst?: boolean | undefined;
	/** Takes what room is left, and wraps. */
	wide?: boolean | undefined;
	/** The head is for screen readers only (curve marks, actions). */
	quietHead?: boolean | undefined;
}

export interface Sort {
	by: string;
	direction: 'up' | 'down';
}

/** The sort that a click on a column's head asks for: numbers and dates start with the largest. */
export function nextSort(column: Column, now: Sort | undefined): Sort | null {
	if (!column.sort) return null;
	const first = (column.largestFirst ?? isNumeric(column)) ? 'down' : 'up';
	if (now?.by !== column.sort) return { by: column.sort, direction: first };
	return { by: column.sort, direction: now.direction === 'up' ? 'down' : 'up' };
}

export const isNumeric = (column: Column): boolean => column.numeric ?? column.unit !== undefined;

/** `?sort=-peak_power&…` on top of what the address already holds; a minus means largest first. The page goes back to the first. */
export function sortHref(url: URL, sort: Sort): string {
	const query = new URLSearchParams(url.searchParams);
	query.set('sort', `${sort.direction === 'down' ? '-' : ''}${sort.by}`);
	query.delete('cursor');
	return `?${query.toString()}`;
}

/** The sort an address holds, if it is one of the columns'. */
export function readSort(url: URL, columns: readonly Column[]): Sort | undefined {
	const text = url.searchParams.get('sort') ?? '';
	const by = text.replace(/^-/, '');
	if (!columns.some((column) => column.sort === by)) return undefined;
	return { by, direction: text.startsWith('-') ? 'down' : 'up' };
}

/** The address with another page's cursor, or with none for the first page; filters and sort stay. */
export function cursorHref(url: URL, cursor: string | null): string {
	const query = new URLSearchParams(url.searchParams);
	if (cursor) query.set('cursor', cursor);
	else query.delete('cursor');
	return `?${query.toString()}`;
}
