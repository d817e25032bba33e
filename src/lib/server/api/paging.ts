import { z } from 'zod';
import { badRequest } from '../problem';

export const PageQuery = z.object({
	limit: z.coerce.number().int().min(1).max(200).default(50),
	cursor: z.string().max(400).optional()
});

export const pageOf = <T extends z.ZodType>(item: T) =>
	z.object({ items: z.array(item), nextCursor: z.string().nullable() });

/** Pages by key, never by offset: a page stays right while rows are added before it. */
function cursorOf(values: (string | number)[]): string {
	return Buffer.from(JSON.stringify(values)).toString('base64url');
}

export function readCursor(cursor: string): string[] {
	try {
		const values: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
		if (Array.isArray(values) && values.every((v) => typeof v === 'string')) return values;
	} catch {
		// Falls through to the same refusal.
	}
	throw badRequest('cursor: send the nextCursor of an earlier answer as it was.');
}

/** Cuts the one row that was read too many, and makes the next page's cursor from the last row kept. */
export function page<T>(
	rows: T[],
	limit: number,
	key: (row: T) => (string | number)[]
): { items: T[]; nextCursor: string | null } {
	const items = rows.slice(0, limit);
	const last = items.at(-1);
	return { items, nextCursor: rows.length > limit && last ? cursorOf(key(last)) : null };
}
