import { sql } from 'kysely';
import type { Trx } from '../db';
import { selectHeads } from './heads';
import type { RunDetail } from './schemas';
import { stillNeeded } from './still-needed';

type TraceViewIn = RunDetail['traces'][number];

function selectRun(trx: Trx, id: string) {
	return selectHeads(trx)
		.leftJoin('person as v', 'v.id', 'r.reviewedBy')
		.leftJoin('booking as k', 'k.id', 'r.bookingId')
		.leftJoin('limitSet as l', 'l.id', 'r.limitSetId')
		.where('r.id', '=', id)
		.select([
			'r.loggedBy as loggedById',
			'k.number as booking',
			'l.code as limitSet',
			'r.correction',
			'r.net',
			'r.auxiliaries',
			'r.inletDepressionKpa',
			'r.exhaustBackPressureKpa',
			'r.ambient',
			'r.settings',
			'r.endedAt',
			'v.displayName as reviewedBy',
			'r.reviewedAt',
			'r.reviewReason',
			'r.version'
		]);
}

/** The whole record as the API and the run page show it; the run must be visible to this transaction's person. */
export async function readRun(trx: Trx, id: string): Promise<RunDetail> {
	const run = await selectRun(trx, id).executeTakeFirstOrThrow();
	const traces = await readTraces(trx, id);
	const metrics = await trx
		.selectFrom('metric')
		.select(['code', 'value', 'unit', 'u', 'at', 'method', 'outsideRange'])
		.where('runId', '=', id)
		.where('isCurrent', '=', true)
		.orderBy('code')
		.execute();
	const reduction = await trx
		.selectFrom('reduction as d')
		.innerJoin('trace as t', 't.id', 'd.traceId')
		.select('d.points')
		.where('d.runId', '=', id)
		.where('d.supersededAt', 'is', null)
		.where('t.isPrimary', '=', true)
		.executeTakeFirst();
	const flags = await readFlags(trx, id);
	return {
		...run,
		kind: run.kind as RunDetail['kind'],
		state: run.state as RunDetail['state'],
		correction: run.correction as RunDetail['correction'],
		auxiliaries: run.auxiliaries as RunDetail['auxiliaries'],
		stillNeeded: await stillNeeded(trx, run),
		traces,
		metrics: Object.fromEntries(
			metrics.map(({ code, at, ...rest }) => [code, { ...rest, at: at as Record<string, number> | null }])
		),
		points: (reduction?.points ?? []) as RunDetail['points'],
		flags
	};
}

async function readTraces(trx: Trx, runId: string): Promise<TraceViewIn[]> {
	const rows = await trx
		.selectFrom('trace')
		.selectAll()
		.where('runId', '=', runId)
		.orderBy('createdAt')
		.orderBy('id')
		.execute();
	const findings = await trx
		.selectFrom('finding as f')
		.innerJoin('reduction as d', 'd.id', 'f.reductionId')
		.select(['f.traceId', 'f.code', 'f.severity', 'f.message', 'f.spans', 'f.channel'])
		.where('d.runId', '=', runId)
		.where('d.supersededAt', 'is', null)
		.orderBy(sql`array_position(array['error','warning','info'], f.severity)`)
		.orderBy('f.code')
		.orderBy('f.id')
		.execute();
	return rows.map((row) => ({
		id: row.id,
		state: row.state as TraceViewIn['state'],
		filename: row.filename,
		primary: row.isPrimary,
		timeOffsetS: row.timeOffsetS,
		sizeBytes: row.sizeBytes,
		sha256: row.sha256.toString('hex'),
		rows: row.rowCount,
		sampleRateHz: row.sampleRateHz,
		channels: row.channels as TraceViewIn['channels'],
		findings: findings
			.filter((finding) => finding.traceId === row.id)
			.map((finding) => ({
				code: finding.code,
				severity: finding.severity as 'info',
				message: finding.message,
				spans: finding.spans as [number, number][],
				channel: finding.channel
			})),
		proposal: row.proposal,
		error: row.error,
		createdAt: row.createdAt
	}));
}

async function readFlags(trx: Trx, runId: string): Promise<RunDetail['flags']> {
	const rows = await trx
		.selectFrom('flag as f')
		.leftJoin('reduction as d', 'd.id', 'f.reductionId')
		.leftJoin('trace as t', (on) => on.onRef('t.id', '=', 'd.traceId'))
		.leftJoin('person as p', 'p.id', 'f.raisedBy')
		.select([
			't.id as traceId',
			't.filename',
			'f.id',
			'f.rule',
			'f.severity',
			'f.spans',
			'f.worst',
			'f.totalS',
			'f.message',
			'p.displayName as raisedBy'
		])
		.where('f.runId', '=', runId)
		.where((eb) => eb.or([eb('f.reductionId', 'is', null), eb('d.supersededAt', 'is', null)]))
		.orderBy(sql`array_position(array['breach','review','note'], f.severity)`)
		.orderBy('f.createdAt')
		.orderBy('f.id')
		.execute();
	return rows.map(({ traceId, filename, ...row }) => ({
		...row,
		trace: traceId === null ? null : { id: traceId, filename: filename ?? '' },
		severity: row.severity as RunDetail['flags'][number]['severity'],
		spans: row.spans as [number, number][],
		worst: row.worst as RunDetail['flags'][number]['worst']
	}));
}
