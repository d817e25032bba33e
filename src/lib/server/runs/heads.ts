import type { Trx } from '../db';

/** What every view of a run begins with: what it was, of what, where, when and by whom. */
export function selectHeads(trx: Trx) {
	return trx
		.selectFrom('run as r')
		.innerJoin('client as c', 'c.id', 'r.clientId')
		.innerJoin('build as b', 'b.id', 'r.buildId')
		.innerJoin('engine as e', 'e.id', 'b.engineId')
		.innerJoin('cell', 'cell.id', 'r.cellId')
		.innerJoin('fuelBatch as f', 'f.id', 'r.fuelBatchId')
		.innerJoin('person as p', 'p.id', 'r.loggedBy')
		.select([
			'r.id',
			'r.number',
			'c.code as client',
			'b.number as build',
			'b.id as buildId',
			'b.title as buildTitle',
			'e.code as engine',
			'cell.code as cell',
			'cell.colour as cellColour',
			'f.code as fuelBatch',
			'r.kind',
			'r.state',
			'r.startedAt',
			'p.displayName as loggedBy'
		]);
}
