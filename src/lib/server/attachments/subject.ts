import type { Trx } from '../db';
import { conflict } from '../problem';
import { resolve, type RefKind } from '../refs';

export type SubjectKind = Extract<RefKind, 'run' | 'build' | 'fuel_batch'>;

/** What an attachment belongs to, by id, code or number. */
export interface SubjectRef {
	kind: SubjectKind;
	ref: string;
}

export interface Subject {
	kind: SubjectKind;
	id: string;
	/** Null for a batch of the lab's. */
	clientId: string | null;
}

const COLUMNS = { run: 'runId', build: 'buildId', fuel_batch: 'fuelBatchId' } as const;
export const columnOf = (kind: SubjectKind) => COLUMNS[kind];

export async function findSubject(trx: Trx, { kind, ref }: SubjectRef): Promise<Subject> {
	return { kind, ...(await resolve(trx, kind, ref)) };
}

/** @throws Problem 409 for a run whose record is decided: what a reviewer saw stays in it */
export async function refuseDecided(trx: Trx, subject: Subject): Promise<void> {
	if (subject.kind !== 'run') return;
	const run = await trx
		.selectFrom('run')
		.select(['number', 'state'])
		.where('id', '=', subject.id)
		.executeTakeFirstOrThrow();
	if (run.state === 'accepted' || run.state === 'voided')
		throw conflict(`Run ${run.number} is ${run.state}: what was attached to it stays.`);
}
