import type { z } from 'zod';
import type { Principal } from '../access';
import { jsonb, reading, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { conflict, forbidden, wrongField } from '../problem';
import { resolve } from '../refs';
import { lockRun } from './locked';
import { readRun } from './read';
import type { HistoryEntry, LogLineView, NewFlag, NewLogLine, RunDetail } from './schemas';

export async function getRun(deps: Deps, who: Principal, ref: string): Promise<RunDetail> {
	return reading(deps.pools, who, async (trx) => readRun(trx, (await resolve(trx, 'run', ref)).id));
}

export async function closeRun(
	deps: Deps,
	who: Principal,
	ref: string,
	ifMatch: number | null
): Promise<RunDetail> {
	return writing(deps.pools, who, async (trx) => {
		const run = await lockRun(trx, ref, ifMatch);
		if (run.state !== 'open')
			throw conflict(`Run ${run.number} is ${run.state}; only an open record can be closed.`);
		await trx
			.updateTable('run')
			.set({ state: 'closed', endedAt: deps.now(), version: run.version + 1 })
			.where('id', '=', run.id)
			.execute();
		await recordAudit(trx, who, {
			action: 'run.close',
			subject: 'run',
			subjectId: run.id,
			clientId: run.clientId
		});
		return readRun(trx, run.id);
	});
}

/** Accepts a run's figures. Nobody accepts a run that they logged themselves. */
export async function acceptRun(
	deps: Deps,
	who: Principal,
	ref: string,
	reason: string | undefined,
	ifMatch: number | null
) {
	return review(deps, who, ref, 'accepted', reason ?? null, ifMatch);
}

/** Sets a run aside for good, with the reason; its record stays. */
export async function voidRun(
	deps: Deps,
	who: Principal,
	ref: string,
	reason: string,
	ifMatch: number | null
) {
	return review(deps, who, ref, 'voided', reason, ifMatch);
}

async function review(
	deps: Deps,
	who: Principal,
	ref: string,
	state: 'accepted' | 'voided',
	reviewReason: string | null,
	ifMatch: number | null
): Promise<RunDetail> {
	return writing(deps.pools, who, async (trx) => {
		const run = await lockRun(trx, ref, ifMatch);
		if (run.state === 'voided' || run.state === state)
			throw conflict(`Run ${run.number} is ${run.state} already.`);
		if (state === 'accepted' && run.loggedBy === who.personId)
			throw forbidden('accept a run that you logged yourself');
		await trx
			.updateTable('run')
			.set({
				state,
				reviewedBy: who.personId,
				reviewedAt: deps.now(),
				reviewReason,
				version: run.version + 1
			})
			.where('id', '=', run.id)
			.execute();
		await recordAudit(trx, who, {
			action: state === 'accepted' ? 'run.accept' : 'run.void',
			subject: 'run',
			subjectId: run.id,
			clientId: run.clientId,
			before: { state: run.state },
			after: { state, reason: reviewReason }
		});
		return readRun(trx, run.id);
	});
}

/** A flag raised by a person, beside those that rules raise. */
export async function flagRun(
	deps: Deps,
	who: Principal,
	ref: string,
	input: z.output<typeof NewFlag>,
	ifMatch: number | null,
	/** Entering what has happened already: nobody is mailed. */
	{ asHistory = false }: { asHistory?: boolean } = {}
): Promise<RunDetail> {
	if ((input.from === undefined) !== (input.to === undefined))
		throw wrongField('to', 'give both from and to, or neither.');
	if (input.from !== undefined && input.to! < input.from)
		throw wrongField('to', 'must not come before from.');
	return writing(deps.pools, who, async (trx) => {
		const run = await lockRun(trx, ref, ifMatch);
		await trx
			.insertInto('flag')
			.values({
				clientId: run.clientId,
				runId: run.id,
				rule: 'Raised by hand',
				severity: input.severity,
				spans: jsonb(input.from === undefined ? [] : [[input.from, input.to]]) as never,
				message: input.reason,
				raisedBy: who.personId
			})
			.execute();
		await trx
			.updateTable('run')
			.set({ version: run.version + 1 })
			.where('id', '=', run.id)
			.execute();
		await recordAudit(trx, who, {
			action: 'run.flag',
			subject: 'run',
			subjectId: run.id,
			clientId: run.clientId,
			after: input
		});
		if (!asHistory)
			await enqueue(
				trx,
				'mail.notify',
				{ clientId: run.clientId, event: 'run.flagged', subjectId: run.id, revision: run.version + 1 },
				`run.flagged:${run.id}:${run.version + 1}`
			);
		return readRun(trx, run.id);
	});
}

/** A tablet's clock may be ahead of the server's. */
const CLOCKS_APART_MS = 60_000;

export async function addLogLine(
	deps: Deps,
	who: Principal,
	ref: string,
	input: z.output<typeof NewLogLine>
): Promise<z.input<typeof LogLineView>> {
	if (input.supersedes && !input.reason) throw wrongField('reason', 'say why the earlier line is corrected.');
	if (input.at && input.at.getTime() > deps.now().getTime() + CLOCKS_APART_MS)
		throw wrongField('at', 'this lies ahead. A line tells what has been seen or done.');
	return writing(deps.pools, who, async (trx) => {
		const { id: runId, clientId } = await resolve(trx, 'run', ref);
		if (input.supersedes) {
			const earlier = await trx
				.selectFrom('logLine')
				.select('id')
				.where('id', '=', input.supersedes)
				.where('runId', '=', runId)
				.executeTakeFirst();
			if (!earlier) throw wrongField('supersedes', 'there is no such line in this run.');
		}
		const row = await trx
			.insertInto('logLine')
			.values({
				clientId: clientId!,
				runId,
				at: input.at ?? deps.now(),
				text: input.text,
				author: who.personId,
				supersedesId: input.supersedes ?? null,
				reason: input.supersedes ? input.reason! : null
			})
			.returning(['id', 'at', 'text', 'reason'])
			.executeTakeFirstOrThrow();
		return { ...row, author: who.name, supersedes: input.supersedes ?? null };
	});
}

export async function listLogLines(
	deps: Deps,
	who: Principal,
	ref: string
): Promise<z.input<typeof LogLineView>[]> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'run', ref);
		return trx
			.selectFrom('logLine as l')
			.innerJoin('person as p', 'p.id', 'l.author')
			.select([
				'l.id',
				'l.at',
				'l.text',
				'p.displayName as author',
				'l.supersedesId as supersedes',
				'l.reason'
			])
			.where('l.runId', '=', id)
			.orderBy('l.at')
			.orderBy('l.createdAt')
			.execute();
	});
}

/** Who did what to this run, newest first. */
export async function runHistory(
	deps: Deps,
	who: Principal,
	ref: string
): Promise<z.input<typeof HistoryEntry>[]> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'run', ref);
		const rows = await trx
			.selectFrom('audit as a')
			.leftJoin('person as p', 'p.id', 'a.actorId')
			.select(['a.at', 'p.displayName as actor', 'a.action', 'a.after'])
			.where('a.subject', '=', 'run')
			.where('a.subjectId', '=', id)
			.orderBy('a.at', 'desc')
			.orderBy('a.id')
			.execute();
		return rows.map(({ after, ...entry }) => ({ ...entry, detail: detailOf(after) }));
	});
}

function detailOf(after: unknown): string | null {
	if (typeof after !== 'object' || after === null) return null;
	const { reason, filename, detail } = after as Record<string, unknown>;
	const told = detail ?? reason ?? filename;
	return typeof told === 'string' ? told : null;
}
