import { z } from 'zod';
import { requireMay, type Principal } from '../access';
import { rangeOf, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { notFound } from '../problem';
import { resolve } from '../refs';
import { requireFree, tellingClash, type Wish } from './clash';
import { lockCells } from './locked';
import type { Closure, NewClosureInput } from './schemas';
import { requireClosureTimes } from './times';

/** Keeps a cell shut for a time: maintenance, calibration, a visit. @throws Problem 409 with the bookings that stand there */
export async function closeCell(deps: Deps, who: Principal, input: NewClosureInput): Promise<Closure> {
	requireMay(who, 'closure.write');
	requireClosureTimes(input, deps.now());
	let wish: Wish | null = null;
	const close = async (trx: Trx): Promise<Closure> => {
		const cell = await resolve(trx, 'cell', input.cell, { field: 'cell' });
		wish = { key: cell.id, cellId: cell.id, buildId: null, during: input, ignore: [] };
		await requireFree(trx, deps, who, wish);
		await lockCells(trx, cell.id);
		const { id } = await trx
			.insertInto('occupancy')
			.values({
				cellId: cell.id,
				kind: 'closure',
				title: input.title,
				during: rangeOf(input.from, input.to)
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'closure.create',
			subject: 'closure',
			subjectId: id,
			clientId: null,
			after: input
		});
		const { code } = await trx
			.selectFrom('cell')
			.select('code')
			.where('id', '=', cell.id)
			.executeTakeFirstOrThrow();
		return {
			id,
			cell: code,
			from: input.from.toISOString(),
			to: input.to.toISOString(),
			title: input.title
		};
	};
	return tellingClash(
		deps,
		who,
		() => wish,
		() => writing(deps.pools, who, close)
	);
}

/** Opens the cell again. */
export async function removeClosure(deps: Deps, who: Principal, id: string): Promise<void> {
	requireMay(who, 'closure.write');
	const known = z.guid().safeParse(id);
	if (!known.success) throw notFound('This closure');
	await writing(deps.pools, who, async (trx) => {
		const gone = await trx
			.deleteFrom('occupancy')
			.where('id', '=', known.data)
			.where('kind', '=', 'closure')
			.returning(['cellId', 'title', 'during'])
			.executeTakeFirst();
		if (!gone) throw notFound('This closure');
		await recordAudit(trx, who, {
			action: 'closure.remove',
			subject: 'closure',
			subjectId: known.data,
			clientId: null,
			before: gone
		});
	});
}
