import { operation } from '$lib/server/api';
import { CellView, getCell } from '$lib/server/cells';

export const GET = operation({
	id: 'getCell',
	summary: 'One cell',
	action: 'lab.read',
	answer: CellView,
	run: ({ deps, who, params }) => getCell(deps, who, params.id!)
});
