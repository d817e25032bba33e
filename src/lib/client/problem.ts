/** What this side reads of an RFC 9457 problem document; `errors` maps the fields that are wrong to their sentences. */
interface ProblemDocument {
	title?: unknown;
	detail?: unknown;
	errors?: unknown;
	requestId?: unknown;
}

/** An answer of the API that is not what was asked for; `message` is a sentence for the person. */
export class ApiError extends Error {
	constructor(
		/** HTTP status; 0 when the server was not reached. */
		readonly status: number,
		message: string,
		readonly fields: readonly { field: string; message: string }[] = [],
		readonly requestId: string | null = null
	) {
		super(message);
		this.name = 'ApiError';
	}
	/** Whether the same call may well succeed later without any change. */
	get mayRetry(): boolean {
		return this.status === 0 || this.status === 429 || this.status >= 500;
	}
}

const SENTENCES: Record<number, string> = {
	0: 'The server cannot be reached. Nothing was changed; check the network and try again.',
	401: 'You are signed out. Sign in again; what you typed stays here until you leave the page.',
	403: 'Your role may not do this.',
	404: 'This does not exist, or is not yours to see.',
	409: 'This clashes with something that was saved in the meantime. Load the page again and look.',
	413: 'The file is larger than the server takes.',
	429: 'Too many requests in a short time. Wait a minute and try again.',
	503: 'The server is busy or restarting. Try again in a moment.'
};

/** Turns a failed answer (its status, body and `X-Request-Id`) into an error with a sentence. */
export function toApiError(status: number, body: string, requestId: string | null): ApiError {
	const problem = parse(body);
	const sentence =
		textOf(problem.detail) ??
		textOf(problem.title) ??
		SENTENCES[status] ??
		`The server answered ${status}. Nothing was lost here; try again.`;
	return new ApiError(
		status,
		sentence,
		fieldsOf(problem.errors),
		requestId ?? textOf(problem.requestId) ?? null
	);
}

const textOf = (value: unknown) => (typeof value === 'string' && value ? value : undefined);

function fieldsOf(errors: unknown): ApiError['fields'] {
	if (typeof errors !== 'object' || errors === null) return [];
	return Object.entries(errors).map(([field, message]) => ({ field, message: String(message) }));
}

/** A proxy's page, or nothing at all, is a document that says nothing. */
function parse(body: string): ProblemDocument {
	try {
		const document: unknown = JSON.parse(body);
		return typeof document === 'object' && document !== null ? document : {};
	} catch {
		return {};
	}
}
