import { z } from 'zod';
import type { Role } from '../access';
import { lockNames, type Trx } from '../db';
import { conflict, notFound, stale } from '../problem';

export interface LockedPerson {
	id: string;
	name: string;
	role: Role;
	clientId: string | null;
	disabledAt: Date | null;
	version: number;
	/** Has chosen a password. */
	isIn: boolean;
}

/** One change of people at a time: whether an admin is the last one is asked and answered while nobody else changes any. */
export async function lockPerson(trx: Trx, id: string, ifMatch: number | null): Promise<LockedPerson> {
	await lockNames(trx, ['people']);
	const row = z.uuid().safeParse(id).success
		? await trx
				.selectFrom('auth.person as p')
				.select(['p.id', 'p.displayName', 'p.role', 'p.clientId', 'p.disabledAt', 'p.version'])
				.where('p.id', '=', id)
				.forUpdate()
				.executeTakeFirst()
		: undefined;
	if (!row) throw notFound('This person');
	if (ifMatch !== null && ifMatch !== row.version) throw stale();
	const password = await trx
		.selectFrom('auth.password')
		.select('personId')
		.where('personId', '=', row.id)
		.executeTakeFirst();
	const { displayName: name, role, ...rest } = row;
	return { ...rest, name, role: role as Role, isIn: password !== undefined };
}

/** @throws Problem 409 where nobody would be left who can administer people */
export async function requireOtherAdmin(trx: Trx, person: LockedPerson, doing: string): Promise<void> {
	if (person.role !== 'admin' || person.disabledAt) return;
	const other = await trx
		.selectFrom('auth.person as p')
		.innerJoin('auth.password as w', 'w.personId', 'p.id')
		.select('p.id')
		.where('p.role', '=', 'admin')
		.where('p.disabledAt', 'is', null)
		.where('p.id', '<>', person.id)
		.executeTakeFirst();
	if (!other)
		throw conflict(
			`${person.name} is the only administrator who can sign in, and cannot be ${doing}. Make someone else an administrator first.`
		);
}
