import { AsyncLocalStorage } from 'node:async_hooks';
import { setTimeout as sleep } from 'node:timers/promises';
import { sql } from 'kysely';
import pg from 'pg';
import { claimKey, type KeyClaim } from './idempotency';
import type { Db, Pools, Trx } from './pools';

/** Whom a transaction acts for: `clientId` set = the client's login and policies; null = staff; no person = the worker. */
export interface Actor {
	personId: string | null;
	clientId: string | null;
}

/** The worker, acting for nobody in particular. */
export const SYSTEM: Actor = { personId: null, clientId: null };

/** A repeated request's key, claimed inside the first writing transaction of that request, so that an effect happens once. */
export const requestKey = new AsyncLocalStorage<KeyClaim>();

const SERIALIZATION_FAILURE = '40001';
const DEADLOCK = '40P01';
const TRIES = 4;

function dbOf(pools: Pools, who: Actor): Db {
	return who.clientId ? pools.client : pools.lab;
}

async function actAs(trx: Trx, who: Actor): Promise<void> {
	await sql`select set_config('app.client', ${who.clientId ?? ''}, true), set_config('app.person', ${who.personId ?? ''}, true)`.execute(
		trx
	);
}

/** Runs `work` in one short read-only transaction as that person. */
export async function reading<T>(pools: Pools, who: Actor, work: (trx: Trx) => Promise<T>): Promise<T> {
	return dbOf(pools, who)
		.transaction()
		.setAccessMode('read only')
		.execute(async (trx) => {
			await actAs(trx, who);
			return work(trx);
		});
}

/**
 * Runs `work` in one short transaction as that person; again after a deadlock or a serialization failure.
 * So `work` may run twice: no mail, no HTTP, no storage inside it; enqueue a job instead.
 */
export function writing<T>(pools: Pools, who: Actor, work: (trx: Trx) => Promise<T>): Promise<T> {
	return writingAs(dbOf(pools, who), who, work);
}

/**
 * The same as the login that alone reaches schema `auth`: for people and how they sign in. No policy narrows what it sees, so
 * the use case itself asks who may.
 */
export function writingAccounts<T>(pools: Pools, who: Actor, work: (trx: Trx) => Promise<T>): Promise<T> {
	return writingAs(pools.auth, who, work);
}

async function writingAs<T>(db: Db, who: Actor, work: (trx: Trx) => Promise<T>): Promise<T> {
	const claim = requestKey.getStore();
	for (let attempt = 1; ; attempt++) {
		try {
			return await db.transaction().execute(async (trx) => {
				await actAs(trx, who);
				if (claim && !claim.taken) await claimKey(trx, claim);
				const result = await work(trx);
				if (claim) claim.taken = true;
				return result;
			});
		} catch (error) {
			const code = error instanceof pg.DatabaseError ? error.code : undefined;
			if ((code !== SERIALIZATION_FAILURE && code !== DEADLOCK) || attempt === TRIES) throw error;
			await sleep(Math.random() * 20 * attempt);
		}
	}
}

/** Waits for these names in turn; sorted, so that two who want the same ones cannot wait for each other. */
export async function lockNames(trx: Trx, names: string[]): Promise<void> {
	for (const name of [...new Set(names)].sort())
		await sql`select pg_advisory_xact_lock(hashtextextended(${name}, 0))`.execute(trx);
}
