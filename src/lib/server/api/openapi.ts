import { z } from 'zod';
import { ACTIONS } from '../access';
import type { Operation, OperationHandler } from './operation';

type RouteModule = Record<string, unknown>;

const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'] as const;

export interface RouteOperation {
	method: string;
	/** OpenAPI form, e.g. `/runs/{id}`. */
	path: string;
	operation: Operation;
}

function hasOperation(value: unknown): value is OperationHandler {
	return typeof value === 'function' && 'operation' in value;
}

/** Every described operation of the route modules, by their file paths. */
export function operationsOf(modules: Record<string, RouteModule>): RouteOperation[] {
	return Object.entries(modules)
		.flatMap(([file, module]) =>
			METHODS.flatMap((method) => {
				const handler = module[method];
				if (!hasOperation(handler)) return [];
				const path = file
					.replace(/^.*\/api\/v1/, '')
					.replace(/\/\+server\.ts$/, '')
					.replace(/\[(\w+)\]/g, '{$1}');
				return [{ method, path, operation: handler.operation }];
			})
		)
		.sort((a, b) => a.path.localeCompare(b.path) || a.method.localeCompare(b.method));
}

function parametersOf(path: string, operation: Operation): object[] {
	const inPath = [...path.matchAll(/\{(\w+)\}/g)].map((match) => ({
		name: match[1]!,
		in: 'path',
		required: true,
		description: 'The id, or the thing’s own code or number.',
		schema: { type: 'string' }
	}));
	if (!operation.query) return inPath;
	const schema = z.toJSONSchema(operation.query, { io: 'input', unrepresentable: 'any' }) as {
		properties?: Record<string, object>;
		required?: string[];
	};
	const inQuery = Object.entries(schema.properties ?? {}).map(([name, property]) => ({
		name,
		in: 'query',
		required: schema.required?.includes(name) ?? false,
		schema: property
	}));
	return [...inPath, ...inQuery];
}

const problem = (description: string) => ({
	description,
	content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } }
});

/** The OpenAPI 3.1 document, from the same schemas that validate. */
export function openApiDocument(operations: RouteOperation[], version: string): object {
	const paths: Record<string, Record<string, object>> = {};
	for (const { method, path, operation } of operations) {
		const status = String(operation.status ?? 200);
		const body = operation.bytes
			? { content: { 'application/octet-stream': { schema: { type: 'string', format: 'binary' } } } }
			: operation.body && {
					content: {
						'application/json': {
							schema: z.toJSONSchema(operation.body, { io: 'input', unrepresentable: 'any' })
						}
					}
				};
		(paths[path] ??= {})[method.toLowerCase()] = {
			operationId: operation.id,
			summary: operation.summary,
			description: `Roles: ${ACTIONS[operation.action].roles.join(', ')}.`,
			'x-action': operation.action,
			'x-roles': ACTIONS[operation.action].roles,
			parameters: parametersOf(path, operation),
			...(body ? { requestBody: body } : {}),
			responses: {
				[status]: {
					description: 'Done',
					...(status === '204'
						? {}
						: {
								content: {
									[operation.mediaType ?? 'application/json']: {
										schema: z.toJSONSchema(operation.answer, { io: 'output', unrepresentable: 'any' })
									},
									...(operation.csv ? { 'text/csv': { schema: { type: 'string' } } } : {})
								}
							})
				},
				'400': problem('A field is wrong; `errors` says which and why'),
				'401': problem('No person is known for this request'),
				'403': problem('Your role may never do this'),
				'404': problem('Absent, or not yours to see'),
				...(method === 'GET' ? {} : { '409': problem('Clash'), '412': problem('Changed meanwhile') })
			}
		};
	}
	return {
		openapi: '3.1.0',
		info: {
			title: 'Trunnion',
			version,
			description:
				'Books dynamometer cells and keeps the run logbook. Physical values are in the units that each field names.'
		},
		servers: [{ url: '/api/v1' }],
		security: [{ bearer: [] }, { session: [] }],
		paths,
		components: {
			securitySchemes: {
				bearer: { type: 'http', scheme: 'bearer' },
				session: { type: 'apiKey', in: 'cookie', name: 'session' }
			},
			schemas: {
				Problem: {
					type: 'object',
					required: ['type', 'title', 'status', 'detail'],
					properties: {
						type: { type: 'string' },
						title: { type: 'string' },
						status: { type: 'integer' },
						detail: { type: 'string' },
						errors: { type: 'object', additionalProperties: { type: 'string' } },
						requestId: { type: 'string' }
					}
				}
			}
		}
	};
}
