import type { RequestEvent, RequestHandler } from '@sveltejs/kit';
import { createHash } from 'node:crypto';
import type { Readable } from 'node:stream';
import { z } from 'zod';
import { requireMay, type Action, type Principal } from '../access';
import { log } from '../config';
import {
	problemOf,
	reading,
	rememberAnswer,
	rememberedAnswer,
	requestKey,
	writing,
	type KeyClaim
} from '../db';
import type { Deps } from '../deps';
import { badRequest, Problem } from '../problem';
import { problemResponse } from './problem-document';
import { answerOf, jsonBody, queryOf } from './request';

interface Call<Q, B> {
	deps: Deps;
	who: Principal;
	params: Record<string, string>;
	query: Q;
	body: B;
	/** The version named by If-Match, when sent. */
	ifMatch: number | null;
	request: Request;
	/** The body as bytes, for operations that take them. */
	bytes: ReadableStream<Uint8Array> | Readable | null;
	url: URL;
}

export interface OperationDefinition<Q extends z.ZodType, B extends z.ZodType, A extends z.ZodType> {
	/** Stable name, also OpenAPI's operationId. */
	id: string;
	summary: string;
	action: Action;
	query?: Q;
	body?: B;
	/** The body is bytes and not JSON; the use case reads the request itself. */
	bytes?: boolean;
	answer: A;
	/** Of an answer that is not JSON. */
	mediaType?: string;
	/** Answers a table of text as well; the use case makes that response. */
	csv?: boolean;
	status?: number;
	run(call: Call<z.output<Q>, z.output<B>>): Promise<z.input<A> | Response>;
}

export type Operation = OperationDefinition<z.ZodType, z.ZodType, z.ZodType>;
export type OperationHandler = RequestHandler & { operation: Operation };

/** A route's handler from its description: who may, what comes in, what goes out; the same description makes the OpenAPI document. */
export function operation<
	Q extends z.ZodType = z.ZodUndefined,
	B extends z.ZodType = z.ZodUndefined,
	A extends z.ZodType = z.ZodType
>(definition: OperationDefinition<Q, B, A>): OperationHandler {
	const described = definition as unknown as Operation;
	const handler = async (event: RequestEvent): Promise<Response> => {
		try {
			return await answer(described, event);
		} catch (error) {
			const problem = problemOf(error);
			if (problem) return problemResponse(problem, event.locals.requestId);
			log.error(
				{ err: error, requestId: event.locals.requestId, operation: definition.id },
				'request failed'
			);
			return problemResponse(
				new Problem(
					500,
					'Our fault',
					`Something failed on our side; nothing half-done was kept. Quote ${event.locals.requestId}.`
				),
				event.locals.requestId
			);
		}
	};
	return Object.assign(handler as RequestHandler, { operation: described });
}

async function answer(definition: Operation, event: RequestEvent): Promise<Response> {
	const { who, deps } = event.locals;
	if (!who) throw new Problem(401, 'Not signed in', 'Send a bearer token, or sign in.');
	requireMay(who, definition.action);
	const query = definition.query ? queryOf(definition.query, event.url) : undefined;
	const parsed =
		definition.body && !definition.bytes
			? await jsonBody(definition.body, event.request)
			: { value: undefined, sha256: null };
	const call: Call<unknown, unknown> = {
		deps,
		who,
		params: event.params as Record<string, string>,
		query,
		body: parsed.value,
		ifMatch: versionOf(event.request.headers.get('if-match')),
		request: event.request,
		bytes: definition.bytes ? bytesOf(event) : null,
		url: event.url
	};
	const claim = claimOf(event, who, parsed.sha256);
	if (!claim) return answerOf(definition, await definition.run(call));
	const before = await reading(deps.pools, who, (trx) => rememberedAnswer(trx, claim));
	if (before) return answerOf(definition, before.answer as never, before.status);
	const result = await requestKey.run(claim, () => definition.run(call));
	const response = answerOf(definition, result);
	if (claim.taken && !(result instanceof Response))
		await writing(deps.pools, who, (trx) => rememberAnswer(trx, claim, response.status, result));
	return response;
}

/**
 * Node's adapter gives no body to a request without a content type, though bytes may well come; they are read from the
 * connection then, so that nobody is told that a file was empty which was not.
 */
function bytesOf(event: RequestEvent): Call<unknown, unknown>['bytes'] {
	if (event.request.body) return event.request.body;
	const raw = event.platform?.req;
	return raw && event.request.headers.get('content-type') === null && !raw.readableEnded ? raw : null;
}

function claimOf(event: RequestEvent, who: Principal, bodySha256: Buffer | null): KeyClaim | null {
	const key = event.request.headers.get('idempotency-key');
	if (key === null || event.request.method !== 'POST') return null;
	if (!key.trim() || key.length > 200) throw badRequest('Idempotency-Key: use 1 to 200 characters.');
	const length = event.request.headers.get('content-length') ?? '';
	return {
		personId: who.personId,
		key,
		route: `${event.request.method} ${event.url.pathname}${event.url.search}`,
		// Bytes are streamed and not hashed beforehand: their length stands for them.
		bodySha256: bodySha256 ?? createHash('sha256').update(length).digest(),
		taken: false
	};
}

function versionOf(header: string | null): number | null {
	if (header === null || header.trim() === '*') return null;
	const tag = /^(?:W\/)?"(\d{1,9})"$/.exec(header.trim());
	if (!tag)
		throw new Problem(412, 'Changed meanwhile', 'If-Match: send the ETag exactly as it was received.');
	return Number(tag[1]);
}
