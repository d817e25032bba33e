import { text } from '@sveltejs/kit';
import type { RequestHandler } from './$types';
import { isReady } from '$lib/server/health';

export const GET: RequestHandler = async ({ locals }) => {
	const ready = await isReady(locals.deps);
	return text(ready ? 'ready' : 'not ready', {
		status: ready ? 200 : 503,
		headers: { 'cache-control': 'no-store' }
	});
};
