import type { z } from 'zod';
import type { Principal } from '../access';
import { jsonb, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { resolve } from '../refs';
import { lockRun, refuseDecided } from './locked';
import { refuseCorrection } from './open';
import { readRun } from './read';
import type { RunChange, RunDetail } from './schemas';

const DECLARED = [
	'correction',
	'net',
	'auxiliaries',
	'inletDepressionKpa',
	'exhaustBackPressureKpa',
	'ambient',
	'limitSetId'
] as const;

/** Changes what is declared of a run that is not decided; figures that depend on it are made again. */
export async function changeRun(
	deps: Deps,
	who: Principal,
	ref: string,
	{ limitSet, ambient, ...input }: z.output<typeof RunChange>,
	ifMatch: number | null
): Promise<RunDetail> {
	return writing(deps.pools, who, async (trx) => {
		const run = await lockRun(trx, ref, ifMatch);
		refuseDecided(run, 'what is declared of it stays.');
		const before = await trx
			.selectFrom('run')
			.select(['buildId', ...DECLARED])
			.where('id', '=', run.id)
			.executeTakeFirstOrThrow();
		if (input.correction) await refuseCorrection(trx, before.buildId, input.correction);
		const after = {
			...input,
			...(ambient === undefined ? {} : { ambient }),
			...(limitSet === undefined ? {} : { limitSetId: await limitSetOf(trx, limitSet, run.clientId) })
		};
		const changed = DECLARED.filter((name) => name in after && !isSame(after[name], before[name]));
		if (changed.length === 0) return readRun(trx, run.id);
		await trx
			.updateTable('run')
			.set({
				...after,
				...(ambient === undefined ? {} : { ambient: jsonb(ambient) as never }),
				version: run.version + 1
			})
			.where('id', '=', run.id)
			.execute();
		const only = (values: object) => Object.fromEntries(changed.map((name) => [name, values[name as never]]));
		await recordAudit(trx, who, {
			action: 'run.declare',
			subject: 'run',
			subjectId: run.id,
			clientId: run.clientId,
			before: only(before),
			after: { ...only(after), detail: changed.map((name) => WORDS[name]).join(', ') }
		});
		if (changed.some((name) => FEEDS_FIGURES.has(name))) await recompute(trx, run.id, run.clientId);
		return readRun(trx, run.id);
	});
}

const FEEDS_FIGURES = new Set<string>(['correction', 'ambient', 'limitSetId']);
const WORDS: Readonly<Record<(typeof DECLARED)[number], string>> = {
	correction: 'correction',
	net: 'net or gross',
	auxiliaries: 'auxiliaries',
	inletDepressionKpa: 'intake depression',
	exhaustBackPressureKpa: 'exhaust back-pressure',
	ambient: 'air in the cell',
	limitSetId: 'limit set'
};

async function limitSetOf(trx: Trx, ref: string | null, clientId: string): Promise<string | null> {
	return ref === null ? null : (await resolve(trx, 'limit_set', ref, { field: 'limitSet', clientId })).id;
}

/** Objects and lists by what they hold, whatever the order of their keys. */
function isSame(a: unknown, b: unknown): boolean {
	const told = (value: unknown) =>
		typeof value === 'object' && value !== null && !Array.isArray(value)
			? JSON.stringify(Object.entries(value).sort(([x], [y]) => (x < y ? -1 : 1)))
			: JSON.stringify(value);
	return told(a) === told(b);
}

async function recompute(trx: Trx, runId: string, clientId: string): Promise<void> {
	const traces = await trx
		.selectFrom('trace')
		.select('id')
		.where('runId', '=', runId)
		.where('state', '=', 'ready')
		.execute();
	for (const { id } of traces) {
		await trx.updateTable('trace').set({ state: 'received' }).where('id', '=', id).execute();
		await enqueue(trx, 'trace.process', { clientId, traceId: id }, id);
	}
}
