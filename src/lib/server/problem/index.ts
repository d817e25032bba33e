/**
 * An expected refusal, told as an RFC 9457 problem document by the API and as a sentence at the field by a form.
 * Use cases throw it; anything else thrown is a bug and becomes a 500 with an id.
 */
export class Problem extends Error {
	constructor(
		readonly status: number,
		readonly title: string,
		override readonly message: string,
		/** Field path → sentence, for wrong input. */
		readonly fields: Record<string, string> = {},
		readonly extra: Record<string, unknown> = {}
	) {
		super(message);
	}
}

export const badRequest = (message: string, fields: Record<string, string> = {}) =>
	new Problem(400, 'The request is not right', message, fields);

/** One field is wrong: the sentence goes beside it. */
export const wrongField = (field: string, message: string) =>
	badRequest(`${field}: ${message}`, { [field]: message });

/** Absent and another client's look alike, by law of the product. */
export const notFound = (what = 'What you asked for') =>
	new Problem(404, 'Not found', `${what} does not exist, or is not yours to see.`);

export const forbidden = (what: string) => new Problem(403, 'Not allowed', `Your role may not ${what}.`);

export const conflict = (message: string, extra: Record<string, unknown> = {}) =>
	new Problem(409, 'Conflict', message, {}, extra);

export const stale = () =>
	new Problem(
		412,
		'Changed meanwhile',
		'Someone changed this after you read it. Read it again, then repeat your change.'
	);
