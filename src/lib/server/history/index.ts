import { z } from 'zod';
import { fields } from '../api';
import type { Trx } from '../db';

export const HistoryView = z.object({
	items: z.array(
		z.object({
			at: fields.instantOut,
			/** Null where the worker did it, or someone whose name is not the reader's to know. */
			actor: z.string().nullable(),
			action: z.string(),
			detail: z.string().nullable()
		})
	)
});
export type History = z.input<typeof HistoryView>['items'];

type Told = Record<string, unknown>;
const told = (value: unknown): Told => (typeof value === 'object' && value !== null ? (value as Told) : {});

/**
 * Who did what to one thing, newest first; a client reads what concerns its own.
 * @param changesOf says in words what a change changed
 */
export async function readHistory(
	trx: Trx,
	subject: string,
	subjectId: string,
	changesOf: (before: Told, after: Told) => string
): Promise<History> {
	const rows = await trx
		.selectFrom('audit as a')
		.leftJoin('person as p', 'p.id', 'a.actorId')
		.select(['a.at', 'p.displayName as actor', 'a.action', 'a.before', 'a.after'])
		.where('a.subject', '=', subject)
		.where('a.subjectId', '=', subjectId)
		.orderBy('a.at', 'desc')
		.orderBy('a.id')
		.execute();
	return rows.map(({ before, after, ...entry }) => ({
		...entry,
		detail: detailOf(told(before), told(after), changesOf)
	}));
}

function detailOf(
	before: Told,
	after: Told,
	changesOf: (before: Told, after: Told) => string
): string | null {
	const plain = [after.filename, after.detail].find((text) => typeof text === 'string');
	const changes = Object.keys(before).length > 0 ? changesOf(before, after) : '';
	const reason = typeof after.reason === 'string' && after.reason ? `“${after.reason}”` : '';
	return [plain, changes, reason].filter(Boolean).join('; ') || null;
}
