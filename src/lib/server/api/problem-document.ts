import type { Problem } from '../problem';

/** RFC 9457. `about:blank` types: the title and status say all that a type page could. */
export function problemResponse(problem: Problem, requestId: string): Response {
	const headers: Record<string, string> = {
		'content-type': 'application/problem+json',
		'cache-control': 'no-store'
	};
	const retryAfterS = problem.extra.retryAfterS;
	if (typeof retryAfterS === 'number') headers['retry-after'] = String(retryAfterS);
	if (problem.status === 503) headers['retry-after'] ??= '2';
	if (problem.status === 401) headers['www-authenticate'] = 'Bearer';
	const fields = Object.keys(problem.fields).length ? { errors: problem.fields } : {};
	return new Response(
		JSON.stringify({
			type: 'about:blank',
			title: problem.title,
			status: problem.status,
			detail: problem.message,
			...fields,
			...problem.extra,
			requestId
		}),
		{ status: problem.status, headers }
	);
}
