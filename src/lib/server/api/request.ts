import { createHash } from 'node:crypto';
import type { z } from 'zod';
import { badRequest, Problem } from '../problem';
import type { Operation } from './operation';

const MAX_JSON_BYTES = 1024 * 1024;
/** Read on and thrown away, so that the sender hears the refusal and not a broken connection. */
const MOST_DISCARDED_BYTES = 32 * MAX_JSON_BYTES;

/** Field path → sentence, first one of each field; the whole in one sentence for people who read only `detail`. */
function problemOfInput(error: z.ZodError): Problem {
	const fields: Record<string, string> = {};
	for (const issue of error.issues) fields[issue.path.join('.') || 'body'] ??= issue.message;
	const detail = Object.entries(fields).map(([field, sentence]) => `${field}: ${sentence}`);
	return badRequest(`${detail.slice(0, 5).join('; ')}${detail.length > 5 ? '; …' : ''}.`, fields);
}

export function queryOf(schema: z.ZodType, url: URL): unknown {
	const given: Record<string, string> = {};
	for (const [name, value] of url.searchParams) if (value !== '') given[name] = value;
	const read = schema.safeParse(given);
	if (!read.success) throw problemOfInput(read.error);
	return read.data;
}

export async function jsonBody(
	schema: z.ZodType,
	request: Request
): Promise<{ value: unknown; sha256: Buffer }> {
	const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase() ?? '';
	const text = await limitedText(request);
	if (text.trim() && type !== 'application/json' && !type.endsWith('+json'))
		throw new Problem(415, 'Not JSON', `Send application/json${type ? `, not ${type.slice(0, 80)}` : ''}.`);
	let value: unknown = {};
	if (text.trim()) {
		try {
			value = JSON.parse(text);
		} catch (error) {
			throw badRequest(`The body is not JSON: ${(error as Error).message}.`);
		}
	}
	const read = schema.safeParse(value);
	if (!read.success) throw problemOfInput(read.error);
	return { value: read.data, sha256: createHash('sha256').update(text).digest() };
}

async function limitedText(request: Request): Promise<string> {
	if (!request.body) return '';
	const chunks: Uint8Array[] = [];
	let size = 0;
	for await (const chunk of request.body as unknown as AsyncIterable<Uint8Array>) {
		size += chunk.byteLength;
		if (size > MOST_DISCARDED_BYTES) break;
		if (size <= MAX_JSON_BYTES) chunks.push(chunk);
	}
	if (size > MAX_JSON_BYTES) throw new Problem(413, 'Too large', 'A JSON body may have 1 MiB at most.');
	try {
		return new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks));
	} catch {
		throw badRequest('The body is not UTF-8 text.');
	}
}

/** The answer as JSON, with an ETag where the thing carries a version. Fields that the description does not name are not sent. */
export function answerOf(
	definition: Operation,
	result: unknown,
	status = definition.status ?? 200
): Response {
	if (result instanceof Response) return result;
	if (status === 204) return new Response(null, { status, headers: { 'cache-control': 'no-store' } });
	const body = definition.answer.parse(result);
	const headers: Record<string, string> = { 'content-type': 'application/json', 'cache-control': 'no-store' };
	const version = (body as { version?: unknown } | null)?.version;
	if (typeof version === 'number') headers.etag = `"${version}"`;
	return new Response(JSON.stringify(body), { status, headers });
}
