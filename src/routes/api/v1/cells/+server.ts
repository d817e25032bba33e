import { z } from 'zod';
import { operation } from '$lib/server/api';
import { CellView, createCell, listCells, NewCell } from '$lib/server/cells';

export const GET = operation({
	id: 'listCells',
	summary: 'The lab’s cells',
	action: 'lab.read',
	answer: z.object({ items: z.array(CellView) }),
	run: async ({ deps, who }) => ({ items: await listCells(deps, who) })
});

export const POST = operation({
	id: 'createCell',
	summary: 'Add a cell',
	action: 'cell.write',
	body: NewCell,
	answer: CellView,
	status: 201,
	run: ({ deps, who, body }) => createCell(deps, who, body)
});
