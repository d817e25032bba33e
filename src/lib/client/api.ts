import { toApiError } from './problem';

interface Call {
	method?: 'GET' | 'POST' | 'PATCH' | 'DELETE';
	/** Sent as JSON. */
	body?: unknown;
	/** Address parameters; empty ones are left out. */
	query?: Record<string, string | number | null | undefined>;
	/** The version that was seen: the server refuses when it is another by now. */
	ifMatch?: number;
	signal?: AbortSignal;
	/** Kit's `fetch` inside a load; the browser's elsewhere. */
	fetch?: typeof fetch;
	accept?: string;
}

/** Calls `/api/v1` and gives the answer, or throws an `ApiError` with a sentence; an abort throws the signal's reason. */
export async function callApi(path: string, call: Call = {}): Promise<Response> {
	const { method = 'GET', body, query = {}, signal, fetch: ask = fetch, accept = 'application/json' } = call;
	const headers: Record<string, string> = { accept };
	if (call.ifMatch !== undefined) headers['if-match'] = `"${call.ifMatch}"`;
	if (body !== undefined) headers['content-type'] = 'application/json';
	const response = await ask(`/api/v1${path}${queryText(query)}`, {
		method,
		headers,
		...(body === undefined ? {} : { body: JSON.stringify(body) }),
		...(signal ? { signal } : {})
	}).catch((cause: unknown) => {
		if (signal?.aborted) throw cause;
		throw toApiError(0, '', null);
	});
	if (!response.ok) {
		throw toApiError(response.status, await response.text(), response.headers.get('x-request-id'));
	}
	return response;
}

/** The same for an answer in JSON. The shape is the caller's claim: the server's schema is what holds it. */
export async function getJson<T>(path: string, call: Call = {}): Promise<T> {
	const response = await callApi(path, call);
	return (await response.json()) as T;
}

function queryText(query: NonNullable<Call['query']>): string {
	const pairs = Object.entries(query)
		.filter(([, value]) => value !== null && value !== undefined && value !== '')
		.map(([name, value]) => [name, String(value)]);
	return pairs.length ? `?${new URLSearchParams(pairs).toString()}` : '';
}
