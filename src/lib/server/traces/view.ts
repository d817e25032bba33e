import { z } from 'zod';
import { encodeWindow, openColumnar, type TraceWindow } from '$lib/domain/trace';
import type { Curve } from '$lib/domain/model';
import type { Principal } from '../access';
import { fields } from '../api';
import { reading } from '../db';
import type { Deps } from '../deps';
import { asDownload } from '../files';
import { badRequest, notFound, Problem } from '../problem';
import { resolve } from '../refs';

export const WindowQuery = z.object({
	channels: z.string().max(4000).optional(),
	from: z.coerce.number().optional(),
	to: z.coerce.number().optional(),
	points: z.coerce.number().int().min(2).max(8000).default(1000),
	/** Another trace of the run than its primary one. */
	trace: z.uuid().optional()
});

const Extremes = z.object({
	unit: fields.unitOut,
	lo: z.array(z.number().nullable()),
	hi: z.array(z.number().nullable())
});
export const WindowView = z.object({
	/** Single samples, or the lowest and highest of each bucket. */
	mode: z.enum(['samples', 'envelope']),
	clock: z.enum(['time', 'row']),
	from: z.number(),
	to: z.number(),
	samples: z.number(),
	/** Time of each bucket's first sample, s. */
	time: z.array(z.number()),
	channels: z.record(z.string(), Extremes)
});

export function windowJson({ channels, ...window }: TraceWindow): z.input<typeof WindowView> {
	return {
		...window,
		channels: Object.fromEntries(channels.map(({ code, ...extremes }) => [code, extremes]))
	};
}

async function findTrace(deps: Deps, who: Principal, runRef: string, traceId: string | undefined) {
	return reading(deps.pools, who, async (trx) => {
		const { id: runId } = await resolve(trx, 'run', runRef);
		const traces = trx
			.selectFrom('trace')
			.select(['id', 'state', 'columnarKey', 'objectKey', 'filename', 'sizeBytes'])
			.where('runId', '=', runId);
		const trace = await (
			traceId ? traces.where('id', '=', traceId) : traces.where('isPrimary', '=', true)
		).executeTakeFirst();
		if (!trace) throw notFound(traceId ? 'This trace' : 'A trace of this run');
		return trace;
	});
}

/** A stretch of the trace, min and max per bucket, read in pieces from one stored object: no spike is ever lost to the scale. */
export async function readWindow(
	deps: Deps,
	who: Principal,
	runRef: string,
	query: z.output<typeof WindowQuery>
): Promise<TraceWindow> {
	const trace = await findTrace(deps, who, runRef, query.trace);
	if (!trace.columnarKey || trace.state !== 'ready')
		throw new Problem(
			409,
			'Not ready',
			`The trace ${trace.filename} is ${trace.state}; it has no chart yet.`
		);
	const key = trace.columnarKey;
	const columnar = await openColumnar((from, length) => deps.store.readRange(key, from, length));
	const known = new Set(columnar.channels.map((channel) => channel.code));
	const wanted = query.channels?.split(',').filter(Boolean) ?? [...known].slice(0, 4);
	const unknown = wanted.filter((channel) => !known.has(channel));
	if (unknown.length)
		throw badRequest(
			`channels: this trace has no ${unknown.slice(0, 5).join(', ')}. It has ${[...known].slice(0, 40).join(', ')}.`
		);
	if (query.from !== undefined && query.to !== undefined && query.to <= query.from)
		throw badRequest('to: must come after from.');
	return columnar.window({ channels: wanted, from: query.from, to: query.to, points: query.points });
}

export function windowBytes(window: TraceWindow): Response {
	return new Response(encodeWindow(window) as BodyInit, {
		headers: { 'content-type': 'application/octet-stream', 'cache-control': 'no-store' }
	});
}

/** The reduced curve of the primary trace: equal-length columns, `speed` first; empty columns before there are figures. */
export async function readCurve(deps: Deps, who: Principal, runRef: string): Promise<Curve> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'run', runRef);
		const row = await trx
			.selectFrom('reduction as d')
			.innerJoin('trace as t', 't.id', 'd.traceId')
			.select('d.curve')
			.where('d.runId', '=', id)
			.where('d.supersededAt', 'is', null)
			.where('t.isPrimary', '=', true)
			.executeTakeFirst();
		return (row?.curve as unknown as Curve | undefined) ?? { speed: [], torque: [], power: [] };
	});
}

/** The untouched original, as a download that no browser will run. */
export async function downloadOriginal(
	deps: Deps,
	who: Principal,
	runRef: string,
	traceId: string
): Promise<Response> {
	const id = z.uuid().safeParse(traceId).data;
	if (!id) throw notFound('This trace');
	const trace = await findTrace(deps, who, runRef, id);
	return asDownload(deps, { ...trace, contentType: 'application/octet-stream' });
}
