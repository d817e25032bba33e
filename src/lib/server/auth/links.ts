import { randomUUID } from 'node:crypto';
import { recordAudit, writingAccounts, type Trx } from '../db';
import type { Deps } from '../deps';
import { enqueue } from '../jobs';
import { Problem } from '../problem';
import { hashPassword, requireGoodPassword } from './passwords';
import { newSecret, sameHash, sha256 } from './secrets';
import { endSessionsOf } from './sessions';
import { countTry, forgetTries } from './throttle';

const MINUTE_MS = 60_000;

/** The two kinds of link that let someone choose a password, and how long each works after its mail was sent. */
const LINKS = {
	invitation: { table: 'auth.invitation', lastsMs: 7 * 24 * 60 * MINUTE_MS },
	reset: { table: 'auth.reset', lastsMs: 60 * MINUTE_MS }
} as const;
export type LinkKind = keyof typeof LINKS;

const LINK = /^([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})\.([A-Za-z0-9_-]{43})$/;

/** Links of older mails work no more, or of all mails when none is given. */
async function voidLinks(trx: Trx, kind: LinkKind, personId: string, now: Date, exceptMailId?: string) {
	let open = trx
		.updateTable(LINKS[kind].table)
		.set({ voidedAt: now })
		.where('personId', '=', personId)
		.where('usedAt', 'is', null)
		.where('voidedAt', 'is', null);
	if (exceptMailId) open = open.where('mailId', '<>', exceptMailId);
	await open.execute();
}

export async function voidAllLinks(trx: Trx, personId: string, now: Date): Promise<void> {
	for (const kind of Object.keys(LINKS) as LinkKind[]) await voidLinks(trx, kind, personId, now);
}

/**
 * Makes the link of a mail that is about to be sent. Only now, and only into the mail: the table keeps its hash, and no job, no
 * stored mail and no log ever held it.
 */
export async function makeLink(
	deps: Deps,
	kind: LinkKind,
	personId: string,
	mailId: string
): Promise<string> {
	const secret = newSecret();
	const now = deps.now();
	const id = await deps.pools.auth.transaction().execute(async (trx) => {
		await voidLinks(trx, kind, personId, now, mailId);
		const expiresAt = new Date(now.getTime() + LINKS[kind].lastsMs);
		const row = await trx
			.insertInto(LINKS[kind].table)
			.values({ personId, mailId, secretSha256: sha256(secret), expiresAt, createdAt: now })
			.returning('id')
			.executeTakeFirstOrThrow();
		return row.id;
	});
	return `${deps.config.origin}/${kind}/${id}.${secret}`;
}

interface LinkHolder {
	linkId: string;
	personId: string;
	clientId: string | null;
	name: string;
	email: string;
}

/** Whose link this is; null when it never was one, was used, has been replaced, or is too old. Looking uses nothing up. */
export async function holderOfLink(deps: Deps, kind: LinkKind, text: string): Promise<LinkHolder | null> {
	const [, id, secret] = LINK.exec(text) ?? [];
	if (!id || !secret) return null;
	const link = await deps.pools.auth
		.selectFrom(LINKS[kind].table)
		.select(['personId', 'secretSha256'])
		.where('id', '=', id)
		.where('usedAt', 'is', null)
		.where('voidedAt', 'is', null)
		.where('expiresAt', '>', deps.now())
		.executeTakeFirst();
	if (!link || !sameHash(secret, link.secretSha256)) return null;
	const person = await deps.pools.auth
		.selectFrom('auth.person')
		.select(['id as personId', 'clientId', 'displayName as name', 'email'])
		.where('id', '=', link.personId)
		.where('disabledAt', 'is', null)
		.executeTakeFirst();
	return person ? { linkId: id, ...person } : null;
}

const spent = () =>
	new Problem(
		410,
		'This link works no more',
		'This link was used, has been replaced by a newer one, or is too old. Nothing was changed.'
	);

/**
 * Uses a link up to set the password. Of any number of tries at once one succeeds; all sessions of that person end with it.
 * @throws Problem 410 when the link works no more, 400 at the field for a poor password
 */
export async function setPasswordByLink(
	deps: Deps,
	kind: LinkKind,
	text: string,
	password: string,
	address: string
): Promise<void> {
	await countTry(deps, 'link-from', address);
	const holder = await holderOfLink(deps, kind, text);
	if (!holder) throw spent();
	requireGoodPassword(password, 'password', holder);
	const hash = await hashPassword(password);
	const { personId, clientId, linkId } = holder;
	await writingAccounts(deps.pools, { personId, clientId }, async (trx) => {
		const now = deps.now();
		// One after another for one person, whichever of their links is used.
		const person = await trx
			.selectFrom('auth.person')
			.select('id')
			.where('id', '=', personId)
			.where('disabledAt', 'is', null)
			.forUpdate()
			.executeTakeFirst();
		const used = await trx
			.updateTable(LINKS[kind].table)
			.set({ usedAt: now })
			.where('id', '=', linkId)
			.where('usedAt', 'is', null)
			.where('voidedAt', 'is', null)
			.where('expiresAt', '>', now)
			.returning('id')
			.executeTakeFirst();
		if (!person || !used) throw spent();
		await voidAllLinks(trx, personId, now);
		await replacePassword(trx, holder, hash, now, kind === 'invitation' ? 'person.join' : 'person.reset');
		await endSessionsOf(trx, personId);
	});
	await forgetTries(deps, 'sign-in', holder.email);
}

/** In the caller's transaction. Who had a password before is told by mail that it is another now. */
export async function replacePassword(
	trx: Trx,
	{ personId, clientId }: { personId: string; clientId: string | null },
	hash: string,
	now: Date,
	action: 'person.join' | 'person.reset' | 'person.password'
): Promise<void> {
	const before = await trx
		.selectFrom('auth.password')
		.select('personId')
		.where('personId', '=', personId)
		.executeTakeFirst();
	await trx
		.insertInto('auth.password')
		.values({ personId, hash, changedAt: now })
		.onConflict((clash) => clash.column('personId').doUpdateSet({ hash, changedAt: now }))
		.execute();
	await recordAudit(
		trx,
		{ personId, clientId },
		{ action, subject: 'person', subjectId: personId, clientId }
	);
	if (!before) return;
	const occasionId = randomUUID();
	await enqueue(
		trx,
		'mail.account',
		{ event: 'person.password_changed', personId, clientId, occasionId, byId: null },
		occasionId
	);
}
