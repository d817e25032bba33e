import { operation } from '$lib/server/api';
import { readWindow, windowBytes, windowJson, WindowQuery, WindowView } from '$lib/server/traces';

export const GET = operation({
	id: 'readTraceWindow',
	summary: 'A window of the trace, min and max per bucket; binary with Accept: application/octet-stream',
	action: 'run.read',
	query: WindowQuery,
	answer: WindowView,
	run: async ({ deps, who, params, query, request }) => {
		const window = await readWindow(deps, who, params.id!, query);
		return request.headers.get('accept')?.includes('application/octet-stream')
			? windowBytes(window)
			: windowJson(window);
	}
});
