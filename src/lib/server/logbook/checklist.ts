import type { z } from 'zod';
import { CHECKLIST, CHECKLIST_VERSION } from '$lib/domain/care/checklist';
import type { Principal } from '../access';
import { reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { wrongField } from '../problem';
import { resolve } from '../refs';
import type { Checklist, NewCheck } from './schemas';

type Check = NonNullable<Checklist['items'][number]['holds']>;

async function readChecklist(trx: Trx, runId: string): Promise<Checklist> {
	const rows = await trx
		.selectFrom('checklistEntry as k')
		.innerJoin('person as p', 'p.id', 'k.author')
		.select(['k.item', 'k.answer', 'k.reason', 'k.at', 'p.displayName as by'])
		.where('k.runId', '=', runId)
		.orderBy('k.at', 'desc')
		.orderBy('k.createdAt', 'desc')
		.execute();
	return {
		version: CHECKLIST_VERSION,
		items: CHECKLIST.map(({ code, text, look }) => {
			const [holds = null, ...before] = rows
				.filter(({ item }) => item === code)
				.map(({ answer, reason, at, by }): Check => ({ answer: answer as Check['answer'], reason, at, by }));
			return { item: code, text, look, holds, before };
		})
	};
}

export async function getChecklist(deps: Deps, who: Principal, runRef: string): Promise<Checklist> {
	return reading(deps.pools, who, async (trx) => readChecklist(trx, (await resolve(trx, 'run', runRef)).id));
}

/** How many items nobody has answered as done or as not applying, of each of these runs. */
export async function openChecks(trx: Trx, runIds: readonly string[]): Promise<Map<string, number>> {
	const open = new Map(runIds.map((id) => [id, CHECKLIST.length]));
	if (runIds.length === 0) return open;
	const holding = await trx
		.selectFrom('checklistEntry')
		.distinctOn(['runId', 'item'])
		.select(['runId', 'item', 'answer'])
		.where('runId', 'in', [...runIds])
		.where(
			'item',
			'in',
			CHECKLIST.map(({ code }) => code)
		)
		.orderBy('runId')
		.orderBy('item')
		.orderBy('at', 'desc')
		.orderBy('createdAt', 'desc')
		.execute();
	for (const { runId, answer } of holding)
		if (answer !== 'not_done') open.set(runId, (open.get(runId) ?? 0) - 1);
	return open;
}

/** An answer to one item; earlier ones stay. It records what somebody saw to and releases nothing. */
export async function answerCheck(
	deps: Deps,
	who: Principal,
	runRef: string,
	input: z.output<typeof NewCheck>
): Promise<Checklist> {
	const asked = CHECKLIST.find(({ code }) => code === input.item);
	if (!asked) throw wrongField('item', 'there is no such item on the checklist.');
	return writing(deps.pools, who, async (trx) => {
		const { id: runId, clientId } = await resolve(trx, 'run', runRef);
		await trx
			.insertInto('checklistEntry')
			.values({
				clientId: clientId!,
				runId,
				listVersion: CHECKLIST_VERSION,
				item: input.item,
				answer: input.answer,
				reason: input.reason || null,
				author: who.personId,
				at: deps.now()
			})
			.execute();
		await recordAudit(trx, who, {
			action: `checklist.${input.answer}`,
			subject: 'run',
			subjectId: runId,
			clientId,
			after: { detail: `${asked.text}${input.reason ? ` (${input.reason})` : ''}`, ...input }
		});
		return readChecklist(trx, runId);
	});
}
