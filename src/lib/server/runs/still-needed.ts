import type { Trx } from '../db';
import { openChecks } from '../logbook';

interface Record {
	id: string;
	state: string;
	correction: string;
	net: boolean | null;
}

/** What a record still lacks before somebody can judge it, in words. It gates nothing: the run may well be over. */
export async function stillNeeded(trx: Trx, run: Record): Promise<string[]> {
	if (run.state === 'accepted' || run.state === 'voided') return [];
	const open = (await openChecks(trx, [run.id])).get(run.id) ?? 0;
	const trace = await trx
		.selectFrom('trace')
		.select('id')
		.where('runId', '=', run.id)
		.limit(1)
		.executeTakeFirst();
	return [
		...(open > 0
			? [open === 1 ? 'One item of the pre-run checklist' : `${open} items of the pre-run checklist`]
			: []),
		...(run.correction !== 'none' && run.net === null
			? ['Net or gross: corrected power is compared as one of the two']
			: []),
		...(trace ? [] : ['A trace'])
	];
}
