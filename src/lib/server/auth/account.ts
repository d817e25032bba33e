import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { requireMay, ROLES, type Principal } from '../access';
import { fields } from '../api';
import { recordAudit, writingAccounts } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { notFound, stale, wrongField } from '../problem';
import { replacePassword, voidAllLinks } from './links';
import { hashPassword, requireGoodPassword, verifyPassword } from './passwords';
import { endSessionsOf } from './sessions';
import { mailAddress } from './sign-in';
import { countTry, forgetTries } from './throttle';

export const MeView = z.object({
	id: z.string(),
	email: z.string(),
	name: z.string(),
	role: z.enum(ROLES),
	units: z.enum(['si', 'us']),
	version: z.number().int()
});
export const MeChange = z.object({
	name: fields.label(120).optional(),
	units: z.enum(['si', 'us'], { error: 'choose si or us' }).optional()
});
export const PasswordChange = z.object({
	old: z.string().min(1, 'type your present password').max(1000, 'is too long for a password'),
	new: z.string().min(1, 'type a new password').max(1000, 'is too long for a password')
});

const columns = ['id', 'email', 'displayName as name', 'role', 'units', 'version'] as const;

export async function readMe(deps: Deps, who: Principal): Promise<z.output<typeof MeView>> {
	return MeView.parse(
		await deps.pools.auth
			.selectFrom('auth.person')
			.select(columns)
			.where('id', '=', who.personId)
			.executeTakeFirstOrThrow()
	);
}

/** One's own name and units. @throws Problem 412 when they were changed since they were read */
export async function changeMe(
	deps: Deps,
	who: Principal,
	change: z.output<typeof MeChange>,
	ifMatch: number | null = null
): Promise<z.output<typeof MeView>> {
	requireMay(who, 'account.own');
	return writingAccounts(deps.pools, who, async (trx) => {
		const before = await trx
			.selectFrom('auth.person')
			.select(['displayName as name', 'units', 'version'])
			.where('id', '=', who.personId)
			.forUpdate()
			.executeTakeFirstOrThrow();
		if (ifMatch !== null && ifMatch !== before.version) throw stale();
		const { name = before.name, units = before.units } = change;
		const isSame = name === before.name && units === before.units;
		if (!isSame)
			await recordAudit(trx, who, {
				action: 'person.change',
				subject: 'person',
				subjectId: who.personId,
				clientId: who.clientId,
				before: { name: before.name, units: before.units },
				after: { name, units }
			});
		return MeView.parse(
			await trx
				.updateTable('auth.person')
				.set({ displayName: name, units, version: before.version + (isSame ? 0 : 1) })
				.where('id', '=', who.personId)
				.returning(columns)
				.executeTakeFirstOrThrow()
		);
	});
}

/**
 * Another password, for who knows the present one: all other sessions end, open links are void, and a mail says so.
 * @throws Problem 400 at the field, 429 after too many wrong ones
 */
export async function changePassword(
	deps: Deps,
	who: Principal,
	change: z.output<typeof PasswordChange>
): Promise<void> {
	requireMay(who, 'account.own');
	const row = await deps.pools.auth
		.selectFrom('auth.password')
		.select('hash')
		.where('personId', '=', who.personId)
		.executeTakeFirst();
	if (!row) throw notFound('A password of yours');
	requireGoodPassword(change.new, 'new', who);
	await countTry(deps, 'old-password', who.personId);
	if (!(await verifyPassword(change.old, row.hash)))
		throw wrongField('old', 'this is not your present password.');
	await forgetTries(deps, 'old-password', who.personId);
	const hash = await hashPassword(change.new);
	await writingAccounts(deps.pools, who, async (trx) => {
		await trx
			.selectFrom('auth.person')
			.select('id')
			.where('id', '=', who.personId)
			.forUpdate()
			.executeTakeFirstOrThrow();
		const same = await trx
			.selectFrom('auth.password')
			.select('personId')
			.where('personId', '=', who.personId)
			.where('hash', '=', row.hash)
			.executeTakeFirst();
		if (!same) throw wrongField('old', 'the password was changed a moment ago. Sign in with the new one.');
		const now = deps.now();
		await replacePassword(trx, who, hash, now, 'person.password');
		await voidAllLinks(trx, who.personId, now);
		await endSessionsOf(trx, who.personId, who.via.kind === 'session' ? who.via.id : undefined);
	});
}

/**
 * Promises a link to whoever has this address, and does the same work when nobody has it: the answer and its time tell nothing.
 * @throws Problem 429 after too many requests, for known and unknown addresses alike
 */
export async function askForReset(deps: Deps, typed: string, address: string): Promise<void> {
	const email = mailAddress(typed);
	await countTry(deps, 'forgotten-from', address);
	await countTry(deps, 'forgotten', email);
	const person = await deps.pools.auth
		.selectFrom('auth.person')
		.select(['id', 'clientId'])
		.where('email', '=', email)
		.where('disabledAt', 'is', null)
		.executeTakeFirst();
	const occasionId = randomUUID();
	// For nobody a job is added too; the worker finds no such person and writes nothing.
	const { id: personId, clientId } = person ?? { id: randomUUID(), clientId: null };
	await deps.pools.auth
		.transaction()
		.execute((trx) =>
			enqueue(
				trx,
				'mail.account',
				{ event: 'person.reset', personId, clientId, occasionId, byId: null },
				occasionId
			)
		);
}
