import { sql } from 'kysely';
import type { z } from 'zod';
import { buildChangesInWords } from '$lib/domain/builds/build-words';
import { changedFields } from '$lib/domain/history/changes';
import type { Principal } from '../access';
import { containing, page, sortedBy, type SortKey } from '../api';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { readHistory, type History } from '../history';
import { conflict, stale } from '../problem';
import { clientFor, resolve } from '../refs';
import type { Build, BuildChange, BuildQuery, NewBuild } from './schemas';

export { engineHours, getBuildRecord } from './record';
export { BuildChange, BuildQuery, BuildRecord, BuildView, HoursView, NewBuild, type Build } from './schemas';

const RUNS = sql<number>`(select count(*) from run r where r.build_id = b.id and r.client_id = b.client_id)`;

function selectBuilds(trx: Trx, who: Principal) {
	return trx
		.selectFrom('build as b')
		.innerJoin('client as c', 'c.id', 'b.clientId')
		.innerJoin('engine as e', 'e.id', 'b.engineId')
		.leftJoin('build as p', 'p.id', 'b.parentId')
		.select((eb) => [
			'b.id',
			'c.code as client',
			'e.code as engine',
			'e.id as engineId',
			'e.name as engineName',
			'b.number',
			'b.title',
			'p.number as parent',
			'b.parentId',
			'b.parts',
			'b.state',
			'b.version',
			eb
				.exists(
					eb
						.selectFrom('follow as f')
						.whereRef('f.buildId', '=', 'b.id')
						.where('f.personId', '=', who.personId)
				)
				.as('following'),
			RUNS.as('runs')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectBuilds>['executeTakeFirstOrThrow']>>;
const toBuild = (row: Row): Build => ({
	...row,
	parts: row.parts as Build['parts'],
	state: row.state as Build['state'],
	following: Boolean(row.following),
	runs: Number(row.runs ?? 0)
});

export async function createBuild(
	deps: Deps,
	who: Principal,
	input: z.output<typeof NewBuild>
): Promise<Build> {
	return writing(deps.pools, who, async (trx) => {
		const named = await clientFor(trx, who, input.client);
		const engine = await resolve(trx, 'engine', input.engine, { field: 'engine', clientId: named });
		const clientId = engine.clientId!;
		const parent = input.parent
			? await resolve(trx, 'build', input.parent, { field: 'parent', clientId })
			: null;
		const { id } = await trx
			.insertInto('build')
			.values({
				clientId,
				engineId: engine.id,
				parentId: parent?.id ?? null,
				number: input.number,
				title: input.title,
				parts: jsonb(input.parts) as never
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		// Who makes a build wants to know when a run of it is flagged; they can stop following.
		await trx.insertInto('follow').values({ clientId, buildId: id, personId: who.personId }).execute();
		await recordAudit(trx, who, {
			action: 'build.create',
			subject: 'build',
			subjectId: id,
			clientId,
			after: input
		});
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}

const SORTS: Readonly<Record<'added' | 'number' | 'title' | 'engine' | 'runs', SortKey>> = {
	added: { by: sql`b.created_at`, type: 'timestamptz' },
	number: { by: sql`b.number`, type: 'text' },
	title: { by: sql`lower(b.title)`, type: 'text' },
	engine: { by: sql`e.code`, type: 'text' },
	runs: { by: RUNS, type: 'float8' }
};

export async function listBuilds(
	deps: Deps,
	who: Principal,
	query: z.output<typeof BuildQuery> & { limit: number; cursor?: string | undefined }
) {
	const sorted = sortedBy(SORTS, query.sort ?? '-added', sql`b.id`);
	const rows = await reading(deps.pools, who, async (trx) => {
		let some = selectBuilds(trx, who)
			.select(sorted.key.as('sortKey'))
			.orderBy(sorted.order)
			.limit(query.limit + 1);
		if (query.client) {
			const client = await resolve(trx, 'client', query.client, { field: 'client' });
			some = some.where('b.clientId', '=', client.id);
		}
		if (query.engine) {
			const engine = await resolve(trx, 'engine', query.engine, { field: 'engine' });
			some = some.where('b.engineId', '=', engine.id);
		}
		if (query.state) some = some.where('b.state', '=', query.state);
		if (query.q) {
			const part = containing(query.q);
			some = some.where((eb) => eb.or([eb('b.number', 'ilike', part), eb('b.title', 'ilike', part)]));
		}
		if (query.cursor) some = some.where(sorted.after(query.cursor));
		return some.execute();
	});
	const { items, nextCursor } = page(rows, query.limit, (row) => [row.sortKey, row.id]);
	return { items: items.map(toBuild), nextCursor };
}

export async function getBuild(deps: Deps, who: Principal, ref: string): Promise<Build> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'build', ref);
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}

/**
 * Changes a build's title, state or parts. What has run keeps its parts: the record of its runs speaks of them.
 * @throws Problem 409 for other parts after a run
 */
export async function changeBuild(
	deps: Deps,
	who: Principal,
	ref: string,
	change: z.output<typeof BuildChange>,
	ifMatch: number | null
) {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'build', ref);
		// A run that is opened meanwhile waits for this lock, or this for the run.
		await trx.selectFrom('build').select('id').where('id', '=', id).forUpdate().execute();
		const before = toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const changed = changedFields(before, change as Partial<Build>);
		if (changed.length === 0) return before;
		if (changed.includes('parts') && before.runs > 0)
			throw conflict(
				`Build ${before.number} has run: its parts stay as they were then. Make a new build from it for what is changed.`
			);
		const { title, state, parts } = change;
		await trx
			.updateTable('build')
			.set({
				version: before.version + 1,
				...(title === undefined ? {} : { title }),
				...(state === undefined ? {} : { state }),
				...(parts === undefined ? {} : { parts: jsonb(parts) as never })
			})
			.where('id', '=', id)
			.execute();
		const of = (build: Partial<Build>) => Object.fromEntries(changed.map((field) => [field, build[field]]));
		await recordAudit(trx, who, {
			action: 'build.change',
			subject: 'build',
			subjectId: id,
			clientId,
			before: of(before),
			after: of(change as Partial<Build>)
		});
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}

/** Who changed what on a build: its state, its parts, its title, what is attached to it. */
export async function buildHistory(deps: Deps, who: Principal, ref: string): Promise<History> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'build', ref);
		return readHistory(trx, 'build', id, buildChangesInWords);
	});
}

/** Followers are mailed when a run of the build is flagged. */
export async function followBuild(deps: Deps, who: Principal, ref: string, follow: boolean): Promise<Build> {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'build', ref);
		if (follow)
			await trx
				.insertInto('follow')
				.values({ clientId: clientId!, buildId: id, personId: who.personId })
				.onConflict((clash) => clash.columns(['buildId', 'personId']).doNothing())
				.execute();
		else
			await trx.deleteFrom('follow').where('buildId', '=', id).where('personId', '=', who.personId).execute();
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}
