import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';
import { readHealth } from '$lib/server/health';

export const GET: RequestHandler = async ({ locals }) => {
	const health = await readHealth(locals.deps);
	return json(health, {
		status: health.database === 'ok' ? 200 : 503,
		headers: { 'cache-control': 'no-store' }
	});
};
