import { may, type Role } from '../access';
import { addressOf, makeLink, type LinkKind } from '../auth';
import { log } from '../config';
import { reading, SYSTEM, writing } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { CalendarFacts, calendarText, type CalendarMethod } from './calendar';
import { htmlOf, isOneLine } from './text';
import { senderOf, transportOf } from './transport';

async function mailToSend(deps: Deps, mailId: string) {
	return reading(deps.pools, SYSTEM, (trx) =>
		trx
			.selectFrom('mail as m')
			.innerJoin('person as p', 'p.id', 'm.recipientId')
			.select(['m.id', 'm.clientId', 'm.kind', 'm.recipientId', 'm.subject', 'm.body'])
			.select(['m.calendar', 'm.calendarMethod', 'm.createdAt'])
			.select(['p.role', 'p.clientId as recipientClientId'])
			.where('m.id', '=', mailId)
			.where('m.sentAt', 'is', null)
			.where('m.droppedReason', 'is', null)
			.executeTakeFirst()
	);
}

type PromisedMail = NonNullable<Awaited<ReturnType<typeof mailToSend>>>;

/** Mails about a person's own account say nothing of anyone else, so they need no right but to be that person. */
const isOfAccount = (mail: PromisedMail) => mail.kind.startsWith('person.');

/** Rights are asked for again when the mail leaves: between promise and sending a person may have lost them. */
function stillEntitled(mail: PromisedMail): boolean {
	if (isOfAccount(mail)) return true;
	if (mail.role === 'client') return mail.clientId !== null && mail.recipientClientId === mail.clientId;
	return mail.kind !== 'booking.requested' || may({ role: mail.role as Role }, 'booking.decide');
}

/** A refusal of this mailbox for good. What a server says of us (530, 535 …) or for now (4xx) is worth another try. */
function refusedForGood(error: unknown): number | null {
	const { code, command, responseCode } = error as {
		code?: string;
		command?: string;
		responseCode?: number;
	};
	const isRefusal = code === 'EENVELOPE' && command === 'RCPT TO';
	return isRefusal && responseCode && responseCode >= 550 && responseCode < 560 ? responseCode : null;
}

const LINK_OF: Readonly<Record<string, LinkKind>> = {
	'person.invited': 'invitation',
	'person.reset': 'reset'
};

/** Two mails with links may wait for one person: only the newest one's would work, so only that one goes. */
async function isReplaced(deps: Deps, mail: PromisedMail): Promise<boolean> {
	if (!LINK_OF[mail.kind]) return false;
	return reading(deps.pools, SYSTEM, async (trx) => {
		const newer = await trx
			.selectFrom('mail')
			.select('id')
			.where('recipientId', '=', mail.recipientId)
			.where('kind', '=', mail.kind)
			// Compared in the database: a Date has lost the microseconds.
			.where('createdAt', '>', (eb) => eb.selectFrom('mail').select('createdAt').where('id', '=', mail.id))
			.executeTakeFirst();
		return newer !== undefined;
	});
}

async function settle(deps: Deps, mailId: string, droppedReason: string | null): Promise<void> {
	await writing(deps.pools, SYSTEM, (trx) =>
		trx
			.updateTable('mail')
			.set(droppedReason === null ? { sentAt: deps.now() } : { droppedReason })
			.where('id', '=', mailId)
			.where('sentAt', 'is', null)
			.where('droppedReason', 'is', null)
			.execute()
	);
	if (droppedReason !== null) log.warn({ mailId, droppedReason }, 'mail dropped');
}

/**
 * Sends one promised mail. Safe to run twice: a sent one is skipped, and where a crash or a time-out after the data leaves it
 * open whether it went, the second one carries the same Message-ID.
 * @throws Error when it may work later, so that the queue tries again
 */
export async function sendMail(deps: Deps, { mailId }: JobData<'mail.send'>): Promise<void> {
	const mail = await mailToSend(deps, mailId);
	if (!mail) return;
	if (!stillEntitled(mail)) return settle(deps, mailId, 'The person may no longer read what this mail says.');
	const to = await addressOf(deps, mail.recipientId);
	if (!to) return settle(deps, mailId, 'The person’s account is disabled.');
	// Until they have chosen a password nobody knows that this mailbox is theirs.
	if (!to.isIn && !isOfAccount(mail))
		return settle(deps, mailId, 'The person has not accepted the invitation yet.');
	if (await isReplaced(deps, mail))
		return settle(deps, mailId, 'A newer mail with a link replaces this one.');
	if (!isOneLine(to.email) || !isOneLine(mail.subject))
		return settle(deps, mailId, 'The address or the subject has a character that no header may have.');
	try {
		const kind = LINK_OF[mail.kind];
		const link = kind ? await makeLink(deps, kind, mail.recipientId, mail.id) : null;
		await transportOf(deps).sendMail(messageOf(deps, mail, to, link));
	} catch (error) {
		const refused = refusedForGood(error);
		if (refused) return settle(deps, mailId, `The mail server refused the address (${refused}).`);
		const { responseCode, code } = error as { responseCode?: number; code?: string };
		// Neither the address nor the server's words about it go into the log.
		throw new Error(
			`mail ${mailId} was not taken (${responseCode ?? code ?? 'no answer'}); it will be tried again`
		);
	}
	await settle(deps, mailId, null);
}

function messageOf(deps: Deps, mail: PromisedMail, to: { email: string; name: string }, link: string | null) {
	const { config } = deps;
	const sender = senderOf(config);
	const host = new URL(config.origin).hostname;
	const method = mail.calendarMethod as CalendarMethod | null;
	const body = link ? `${mail.body}\n\n${link}` : mail.body;
	const toName = isOneLine(to.name) ? to.name : '';
	return {
		from: sender,
		to: { name: toName, address: to.email },
		// Given apart from the header, so that no parsing of it can change who receives.
		envelope: { from: sender.address, to: [to.email] },
		messageId: `<mail-${mail.id}@${host}>`,
		date: mail.createdAt,
		subject: mail.subject,
		text: body,
		html: htmlOf(body, config.origin),
		headers: { 'Auto-Submitted': 'auto-generated' },
		...(mail.calendar && method
			? {
					icalEvent: {
						method,
						filename: 'booking.ics',
						content: calendarText(
							CalendarFacts.parse(JSON.parse(mail.calendar)),
							method,
							host,
							{ name: config.labName, email: sender.address },
							{ name: toName || to.email, email: to.email },
							mail.createdAt
						)
					}
				}
			: {})
	};
}
