import { operation } from '$lib/server/api';
import { CellChange, CellView, changeCell, getCell } from '$lib/server/cells';

export const GET = operation({
	id: 'getCell',
	summary: 'One cell',
	action: 'lab.read',
	answer: CellView,
	run: ({ deps, who, params }) => getCell(deps, who, params.id!)
});

export const PATCH = operation({
	id: 'changeCell',
	summary: 'Change what a cell is; its torque chain has versions of its own',
	action: 'cell.write',
	body: CellChange,
	answer: CellView,
	run: ({ deps, who, params, body, ifMatch }) => changeCell(deps, who, params.id!, body, ifMatch)
});
