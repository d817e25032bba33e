import { z } from 'zod';
import type { Principal } from '../access';
import { fields } from '../api';
import { reading, recordAudit, writing } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';

export const NewClient = z.object({ code: fields.code, name: fields.label() });
export const ClientView = z.object({ id: z.string(), code: z.string(), name: z.string() });

const columns = ['id', 'code', 'name'] as const;

export async function createClient(deps: Deps, who: Principal, input: z.output<typeof NewClient>) {
	return writing(deps.pools, who, async (trx) => {
		const client = await trx.insertInto('client').values(input).returning(columns).executeTakeFirstOrThrow();
		await recordAudit(trx, who, {
			action: 'client.create',
			subject: 'client',
			subjectId: client.id,
			clientId: client.id,
			after: input
		});
		return client;
	});
}

export async function listClients(deps: Deps, who: Principal) {
	return reading(deps.pools, who, (trx) =>
		trx.selectFrom('client').select(columns).orderBy('code').execute()
	);
}

export async function getClient(deps: Deps, who: Principal, ref: string) {
	return reading(deps.pools, who, async (trx) => {
		const { id } = await resolve(trx, 'client', ref);
		return trx.selectFrom('client').select(columns).where('id', '=', id).executeTakeFirstOrThrow();
	});
}
