import { createHash } from 'node:crypto';
import { analyseFile, METHOD_VERSION, type AnalysedFile } from '$lib/domain/analysis';
import { encodeColumnar } from '$lib/domain/trace';
import { jsonb, reading, recordAudit, SYSTEM, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { enqueue, type JobData } from '../jobs';
import { readContext, type TraceContext } from './context';

type Ready = Extract<AnalysedFile, { state: 'ready' }>;

interface TraceRow {
	id: string;
	clientId: string;
	runId: string;
	filename: string;
	objectKey: string;
	sha256: Buffer;
	isPrimary: boolean;
}

/**
 * From the stored original to figures. Safe to run twice and to be killed anywhere: what it writes appears in one
 * transaction, and the columnar object has a name made from what it holds.
 */
export async function processTrace(deps: Deps, { traceId, quiet }: JobData<'trace.process'>): Promise<void> {
	const trace = await writing(deps.pools, SYSTEM, async (trx) => {
		return trx
			.updateTable('trace')
			.set({ state: 'processing', error: null })
			.where('id', '=', traceId)
			.returning(['id', 'clientId', 'runId', 'filename', 'objectKey', 'sha256', 'isPrimary'])
			.executeTakeFirst();
	});
	if (!trace) return;
	const told = await reading(deps.pools, SYSTEM, (trx) => readContext(trx, traceId));
	const bytes = await deps.store.get(trace.objectKey);
	if (!createHash('sha256').update(bytes).digest().equals(trace.sha256))
		throw new Error(`object ${trace.objectKey} is not the file that was received: its SHA-256 differs`);
	const analysed = analyseFile(bytes, told.context, { name: trace.filename });
	if (analysed.state === 'ready') await keepFigures(deps, trace, told, analysed, quiet ?? false);
	else await keepRefusal(deps, trace, analysed);
}

async function keepRefusal(
	deps: Deps,
	trace: TraceRow,
	analysed: Exclude<AnalysedFile, Ready>
): Promise<void> {
	const proposal = analysed.state === 'needs_map' ? (jsonb(analysed.proposal) as never) : null;
	await writing(deps.pools, SYSTEM, async (trx) => {
		await supersede(trx, trace.id, deps.now());
		await trx
			.updateTable('trace')
			.set({ state: analysed.state, error: analysed.error, proposal, processedAt: deps.now() })
			.where('id', '=', trace.id)
			.execute();
	});
}

async function keepFigures(
	deps: Deps,
	trace: TraceRow,
	told: TraceContext,
	ready: Ready,
	quiet: boolean
): Promise<void> {
	const columnar = encodeColumnar(ready.trace);
	const columnarKey = `clients/${trace.clientId}/columnar/${trace.id}/${createHash('sha256').update(columnar).digest('hex')}`;
	if ((await deps.store.size(columnarKey)) !== columnar.byteLength)
		await deps.store.put(columnarKey, columnar);
	await writing(deps.pools, SYSTEM, async (trx) => {
		await supersede(trx, trace.id, deps.now());
		const { id: reductionId } = await trx
			.insertInto('reduction')
			.values({
				clientId: trace.clientId,
				runId: trace.runId,
				traceId: trace.id,
				methodVersion: METHOD_VERSION,
				settings: jsonb(told.context.settings) as never,
				inputs: jsonb(told.inputs) as never,
				curve: jsonb(ready.curve) as never,
				points: jsonb(ready.points) as never,
				computedAt: deps.now()
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		await insertResults(trx, trace, reductionId, ready);
		await trx
			.updateTable('trace')
			.set({
				state: 'ready',
				error: null,
				proposal: null,
				columnarKey,
				rowCount: ready.rows,
				sampleRateHz: ready.sampleRateHz,
				channels: jsonb(ready.channels) as never,
				processedAt: deps.now()
			})
			.where('id', '=', trace.id)
			.execute();
		await recordAudit(trx, SYSTEM, {
			action: 'run.figures',
			subject: 'run',
			subjectId: trace.runId,
			clientId: trace.clientId,
			after: {
				detail: `${Object.keys(ready.metrics).length} figures, ${ready.flags.length} flags from ${trace.filename}`,
				reductionId
			}
		});
		// New figures are a new state of the run: whoever edits an older one is told.
		const { version } = await trx
			.updateTable('run')
			.set((eb) => ({ version: eb('version', '+', 1) }))
			.where('id', '=', trace.runId)
			.returning('version')
			.executeTakeFirstOrThrow();
		if (!quiet && trace.isPrimary && ready.flags.length)
			await enqueue(
				trx,
				'mail.notify',
				{
					clientId: trace.clientId,
					event: 'run.flagged',
					subjectId: trace.runId,
					revision: version
				},
				`run.flagged:${reductionId}`
			);
	});
}

/** Earlier computations stay as history; lists and trends stop reading them. Locks the trace, so that two of them take turns. */
async function supersede(trx: Trx, traceId: string, now: Date): Promise<void> {
	await trx.selectFrom('trace').select('id').where('id', '=', traceId).forUpdate().executeTakeFirstOrThrow();
	const old = await trx
		.updateTable('reduction')
		.set({ supersededAt: now })
		.where('traceId', '=', traceId)
		.where('supersededAt', 'is', null)
		.returning('id')
		.execute();
	for (const { id } of old)
		await trx.updateTable('metric').set({ isCurrent: false }).where('reductionId', '=', id).execute();
}

async function insertResults(trx: Trx, trace: TraceRow, reductionId: string, ready: Ready): Promise<void> {
	const { clientId, runId, id: traceId } = trace;
	const metrics = Object.entries(ready.metrics).map(([code, metric]) => ({
		clientId,
		runId,
		reductionId,
		code,
		value: metric.value,
		unit: metric.unit,
		u: metric.u,
		at: metric.at ? (jsonb(metric.at) as never) : null,
		method: metric.method,
		outsideRange: metric.outsideRange ?? null,
		isCurrent: trace.isPrimary
	}));
	if (metrics.length) await trx.insertInto('metric').values(metrics).execute();
	const findings = ready.findings.map((finding) => ({
		clientId,
		traceId,
		reductionId,
		code: finding.code,
		severity: finding.severity,
		message: finding.message,
		spans: jsonb(finding.spans) as never,
		channel: finding.channel ?? null
	}));
	if (findings.length) await trx.insertInto('finding').values(findings).execute();
	const flags = ready.flags.map((flag) => ({
		clientId,
		runId,
		reductionId,
		rule: flag.rule,
		severity: flag.severity,
		spans: jsonb(flag.spans) as never,
		worst: jsonb(flag.worst) as never,
		totalS: flag.totalS,
		message: flag.message
	}));
	if (flags.length) await trx.insertInto('flag').values(flags).execute();
}
