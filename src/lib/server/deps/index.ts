import type { Config } from '../config';
import { openPools, type Pools } from '../db';
import { openObjectStore, type ObjectStore } from '../storage';

/** What a use case may reach outside itself; handed in, so that tests and the worker pass their own. */
export interface Deps {
	config: Config;
	pools: Pools;
	store: ObjectStore;
	now: () => Date;
}

export function openDeps(config: Config, poolSize?: number): Deps {
	return {
		config,
		pools: openPools(
			{
				lab: config.databaseUrl('lab'),
				client: config.databaseUrl('client'),
				auth: config.databaseUrl('auth'),
				queue: config.databaseUrl('queue')
			},
			poolSize
		),
		store: openObjectStore(config.storage),
		now: () => new Date()
	};
}

export async function closeDeps(deps: Deps): Promise<void> {
	deps.store.close();
	await deps.pools.close();
}
