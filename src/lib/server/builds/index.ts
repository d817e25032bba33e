import { sql } from 'kysely';
import type { z } from 'zod';
import type { Principal } from '../access';
import { page, readCursor } from '../api';
import { jsonb, reading, recordAudit, writing, type Trx } from '../db';
import type { Deps } from '../deps';
import { stale } from '../problem';
import { clientFor, resolve } from '../refs';
import type { Build, BuildChange, NewBuild } from './schemas';

export { BuildChange, BuildQuery, BuildView, NewBuild, type Build } from './schemas';

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
			'e.name as engineName',
			'b.number',
			'b.title',
			'p.number as parent',
			'b.parentId',
			'b.parts',
			'b.state',
			'b.version',
			'b.createdAt',
			eb
				.exists(
					eb
						.selectFrom('follow as f')
						.whereRef('f.buildId', '=', 'b.id')
						.where('f.personId', '=', who.personId)
				)
				.as('following'),
			eb
				.selectFrom('run as r')
				.whereRef('r.buildId', '=', 'b.id')
				.select(sql<number>`count(*)`.as('n'))
				.as('runs')
		]);
}

type Row = Awaited<ReturnType<ReturnType<typeof selectBuilds>['executeTakeFirstOrThrow']>>;
const toBuild = (row: Row): Build & { createdAt: Date } => ({
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

export async function listBuilds(
	deps: Deps,
	who: Principal,
	query: {
		client?: string | undefined;
		engine?: string | undefined;
		limit: number;
		cursor?: string | undefined;
	}
) {
	const rows = await reading(deps.pools, who, async (trx) => {
		let all = selectBuilds(trx, who)
			.orderBy('b.createdAt', 'desc')
			.orderBy('b.id')
			.limit(query.limit + 1);
		if (query.client)
			all = all.where(
				'b.clientId',
				'=',
				(await resolve(trx, 'client', query.client, { field: 'client' })).id
			);
		if (query.engine)
			all = all.where(
				'b.engineId',
				'=',
				(await resolve(trx, 'engine', query.engine, { field: 'engine' })).id
			);
		if (query.cursor) {
			const [at, id] = readCursor(query.cursor);
			all = all.where((eb) =>
				eb(sql`(date_trunc('milliseconds', b.created_at))`, '<', new Date(at!)).or(
					eb.and([
						eb(sql`(date_trunc('milliseconds', b.created_at))`, '=', new Date(at!)),
						eb('b.id', '>', id!)
					])
				)
			);
		}
		return all.execute();
	});
	return page(rows.map(toBuild), query.limit, (row) => [row.createdAt.toISOString(), row.id]);
}

export async function getBuild(deps: Deps, who: Principal, ref: string): Promise<Build> {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'build', ref);
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
	});
}

export async function changeBuild(
	deps: Deps,
	who: Principal,
	ref: string,
	change: z.output<typeof BuildChange>,
	ifMatch: number | null
) {
	return writing(deps.pools, who, async (trx) => {
		const { id, clientId } = await resolve(trx, 'build', ref);
		const before = await trx
			.selectFrom('build')
			.select(['title', 'parts', 'state', 'version'])
			.where('id', '=', id)
			.forUpdate()
			.executeTakeFirstOrThrow();
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		await trx
			.updateTable('build')
			.set({
				version: before.version + 1,
				...(change.title === undefined ? {} : { title: change.title }),
				...(change.state === undefined ? {} : { state: change.state }),
				...(change.parts === undefined ? {} : { parts: jsonb(change.parts) as never })
			})
			.where('id', '=', id)
			.execute();
		await recordAudit(trx, who, {
			action: 'build.change',
			subject: 'build',
			subjectId: id,
			clientId,
			before,
			after: change
		});
		return toBuild(await selectBuilds(trx, who).where('b.id', '=', id).executeTakeFirstOrThrow());
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
