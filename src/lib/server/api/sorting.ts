import { sql, type RawBuilder } from 'kysely';
import { z } from 'zod';
import { readCursor } from './paging';

/** What a list can be sorted by: never null, so that every page has a next one; `type` is what its text is read back as. */
export interface SortKey {
	by: RawBuilder<unknown>;
	type: 'text' | 'float8' | 'timestamptz';
}

/** `sort=name`, or `sort=-name` for the largest first. */
export function sortField<N extends string>(names: readonly N[]) {
	const all = names.flatMap((name) => [name, `-${name}`] as const);
	return z.enum(all, { error: `is one of ${all.join(', ')}` }).optional();
}

/** A part of a name or code as typed, anywhere in it: what `like` takes for marks is meant as written. */
export const containing = (text: string) => `%${text.replace(/[\\%_]/g, '\\$&')}%`;

/**
 * A sorted list page by page: order, the key to remember of a row, and what comes after a remembered one. Rows of one key
 * go by their id, so that none is shown twice or left out.
 */
export function sortedBy<N extends string>(
	keys: Readonly<Record<N, SortKey>>,
	sort: N | `-${N}`,
	id: RawBuilder<unknown>
) {
	const down = sort.startsWith('-');
	const { by, type } = keys[sort.replace(/^-/, '') as N];
	// Codes sort as they are written, whatever the language of the database.
	const key = type === 'text' ? sql`(${by}) collate "C"` : by;
	return {
		key: sql<string>`(${by})::text`,
		order: sql`${key} ${down ? sql`desc` : sql`asc`}, ${id}`,
		after(cursor: string): RawBuilder<boolean> {
			const [value, last] = readCursor(cursor);
			const remembered = sql`cast(${value} as ${sql.raw(type)})`;
			return sql<boolean>`(${key} ${down ? sql`<` : sql`>`} ${remembered} or (${key} = ${remembered} and ${id} > ${last}::uuid))`;
		}
	};
}
