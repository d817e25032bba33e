import { operation } from '$lib/server/api';
import { closeCell, ClosureView, NewClosure } from '$lib/server/bookings';

export const POST = operation({
	id: 'closeCell',
	summary: 'Keep a cell shut for a time',
	action: 'closure.write',
	body: NewClosure,
	answer: ClosureView,
	status: 201,
	run: ({ deps, who, body }) => closeCell(deps, who, body)
});
