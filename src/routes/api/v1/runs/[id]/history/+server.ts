import { z } from 'zod';
import { operation } from '$lib/server/api';
import { HistoryEntry, runHistory } from '$lib/server/runs';

export const GET = operation({
	id: 'getRunHistory',
	summary: 'Who did what to this run',
	action: 'run.read',
	answer: z.object({ items: z.array(HistoryEntry) }),
	run: async ({ deps, who, params }) => ({ items: await runHistory(deps, who, params.id!) })
});
