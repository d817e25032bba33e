import { z } from 'zod';

// Else zod tries whether it may eval, which our content security policy refuses and reports. The server keeps its speed.
if (typeof document !== 'undefined') z.config({ jitless: true });

/** RFC 9457 problem document, as the API answers; `errors` names the fields that are wrong. */
const problemSchema = z.object({
	title: z.string().optional(),
	detail: z.string().optional(),
	status: z.number().optional(),
	errors: z.array(z.object({ field: z.string(), message: z.string() })).optional(),
	requestId: z.string().optional()
});

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
	const problem = problemSchema.safeParse(parse(body));
	const detail = problem.success ? (problem.data.detail ?? problem.data.title) : undefined;
	const fields = problem.success ? (problem.data.errors ?? []) : [];
	const sentence =
		detail ?? SENTENCES[status] ?? `The server answered ${status}. Nothing was lost here; try again.`;
	return new ApiError(
		status,
		sentence,
		fields,
		requestId ?? (problem.success ? (problem.data.requestId ?? null) : null)
	);
}

function parse(body: string): unknown {
	try {
		return JSON.parse(body);
	} catch {
		return null;
	}
}
